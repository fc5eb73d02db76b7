import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** One sequence of frames of a station; a new one when the station lost its counter. All frames up to durableSeq are durable or put aside. */
export class Stream extends Model<InferAttributes<Stream>, InferCreationAttributes<Stream>> {
  declare id: CreationOptional<number>
  declare stationId: number
  declare streamUuid: string
  declare durableSeq: CreationOptional<number>
  declare createdAt: Date
}

export const defineStream = (sequelize: Sequelize): void => {
  Stream.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      stationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      streamUuid: { type: DataTypes.STRING(36), allowNull: false },
      durableSeq: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false, defaultValue: 0 },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'streams' },
  )
}
