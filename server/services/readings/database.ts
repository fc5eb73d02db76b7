import type { Sequelize } from 'sequelize'
import { Frame } from '../../models/index.ts'

/** The connection that the tables of this process were defined on. */
export function database(): Sequelize {
  if (!Frame.sequelize) throw new Error('readings were asked for before the database was opened')
  return Frame.sequelize
}
