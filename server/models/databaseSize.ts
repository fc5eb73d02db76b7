import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** How large the database was on a day, so that its growth can be seen. */
export class DatabaseSize extends Model<InferAttributes<DatabaseSize>, InferCreationAttributes<DatabaseSize>> {
  /** `2026-12-01`, UTC. */
  declare day: string
  declare bytes: number
}

export const defineDatabaseSize = (sequelize: Sequelize): void => {
  DatabaseSize.init(
    {
      day: { type: DataTypes.DATEONLY, primaryKey: true },
      bytes: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
    },
    { sequelize, tableName: 'databaseSizes' },
  )
}
