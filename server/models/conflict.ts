import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Frames that came with the key of a stored one and other content: kept aside and counted, never put in its place. */
export class Conflict extends Model<InferAttributes<Conflict>, InferCreationAttributes<Conflict>> {
  declare id: CreationOptional<number>
  declare stationId: number
  declare streamId: number
  declare seq: number
  declare startsAt: Date | null
  declare arrivedAt: Date
  declare reason: string
  declare payload: Buffer
}

export const defineConflict = (sequelize: Sequelize): void => {
  Conflict.init(
    {
      id: { type: DataTypes.BIGINT.UNSIGNED, autoIncrement: true, primaryKey: true },
      stationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      streamId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      seq: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      startsAt: DataTypes.DATE(3),
      arrivedAt: { type: DataTypes.DATE(3), allowNull: false },
      reason: { type: DataTypes.STRING(40), allowNull: false },
      payload: { type: DataTypes.BLOB('medium'), allowNull: false },
    },
    { sequelize, tableName: 'conflicts' },
  )
}
