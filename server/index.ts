/** Reads the configuration, starts the server, and ends it in order when it is asked to. */
import { systemClock } from './config/clock.ts'
import { ConfigurationError, readEnvironment } from './config/environment.ts'
import type { Environment } from './config/environment.ts'
import { ListenRefused } from './config/listen.ts'
import { createLogger } from './config/logger.ts'
import { startServer } from './server.ts'
import { StartRefused } from './services/installation.ts'

/** What a person can mend is said in plain words, without a stack. */
function refuse(sentence: string): never {
  process.stderr.write(`${sentence}\n`)
  process.exit(1)
}

function environmentOrRefuse(): Environment {
  try {
    return readEnvironment(process.env)
  } catch (error) {
    if (error instanceof ConfigurationError) return refuse(error.message)
    throw error
  }
}

const environment = environmentOrRefuse()
const logger = createLogger(environment.logLevel)

process.on('uncaughtException', (error) => {
  logger.fatal({ error }, 'a fault that nothing foresaw: stopping at once')
  process.exit(1)
})

const starting = startServer({ environment, clock: systemClock, logger, onFatal: (reason) => void stop(1, reason) })

let isStopping = false
/** In order; asked a second time, at once. */
async function stop(exitCode: number, reason: string): Promise<void> {
  if (isStopping) process.exit(1)
  isStopping = true
  logger.info({ reason }, 'stopping')
  const running = await Promise.race([
    starting.catch(() => null),
    new Promise<null>((resolve) => setTimeout(resolve, 500, null)),
  ])
  await running?.stop()
  logger.info('stopped')
  process.exit(exitCode)
}

process.on('SIGTERM', () => void stop(0, 'SIGTERM'))
process.on('SIGINT', () => void stop(0, 'SIGINT'))

try {
  await starting
} catch (error) {
  if (error instanceof StartRefused || error instanceof ListenRefused) refuse(error.message)
  throw error
}
