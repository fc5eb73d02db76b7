import { expect, test } from 'vitest'
import { createLogger } from '../../../server/config/logger.ts'

test('secrets are cut out of the log by name, however deep they lie', () => {
  const lines: string[] = []
  const logger = createLogger('info', { write: (line) => void lines.push(line) })
  const secret = 'the canary sings'
  logger.info({ password: secret, body: { token: secret }, a: { b: { secret } } }, 'signed in')
  logger.info({ req: { headers: { cookie: secret, authorization: secret } }, jwtSecret: secret }, 'asked')
  logger.warn({ error: new Error('a fault') }, 'failed')
  expect(lines.join()).not.toContain('canary')
  expect(lines.map((line) => JSON.parse(line).level)).toEqual(['info', 'info', 'warn'])
  expect(JSON.parse(lines[2] ?? '').error.message).toBe('a fault')
})
