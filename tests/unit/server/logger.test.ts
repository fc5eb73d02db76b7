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

test('the statement of a failed query stays out of the log, its cause stays in', () => {
  const lines: string[] = []
  const logger = createLogger('info', { write: (line) => void lines.push(line) })
  const values = "INSERT INTO people\n VALUES ('the canary sings')"
  const cause = Object.assign(new Error(`(conn:8, no: 1062) Duplicate entry\nsql: ${values} - parameters:[]`), {
    code: 'ER_DUP_ENTRY',
    sql: values,
  })
  const error = Object.assign(new Error('the person is not added', { cause }), { sql: values, parent: cause })
  logger.error({ error }, 'failed')
  expect(lines.join()).not.toContain('canary')
  const logged = JSON.parse(lines[0] ?? '').error
  expect(logged).toMatchObject({
    message: 'the person is not added',
    cause: { code: 'ER_DUP_ENTRY', message: '(conn:8, no: 1062) Duplicate entry' },
  })
  expect(logged.cause.stack).toMatch(/Duplicate entry\n\s+at /)
})
