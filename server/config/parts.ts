/** What every service, route, job and socket is given: the world as objects, so that a test can hold each of them. */
import type { Sequelize } from 'sequelize'
import type { Bus } from '../services/bus.ts'
import type { Clock } from './clock.ts'
import type { Environment } from './environment.ts'
import type { Logger } from './logger.ts'

export interface Parts {
  sequelize: Sequelize
  bus: Bus
  clock: Clock
  logger: Logger
  environment: Environment
}

/** What runs beside the routes and is ended in order. */
export interface RunningPart {
  stop(): Promise<void>
}
