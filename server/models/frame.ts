import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Hot store of the newest quarter of an hour, one row a frame of about a second, until compacted into blocks. */
export class Frame extends Model<InferAttributes<Frame>, InferCreationAttributes<Frame>> {
  declare streamId: number
  declare seq: number
  declare stationId: number
  declare startsAt: Date
  declare sampleRate: number
  declare sampleCount: number
  declare sentAt: Date
  declare arrivedAt: Date
  declare commitId: number
  declare digest: Buffer
  declare payload: Buffer
}

export const defineFrame = (sequelize: Sequelize): void => {
  Frame.init(
    {
      streamId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      seq: { type: DataTypes.BIGINT.UNSIGNED, primaryKey: true },
      stationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      startsAt: { type: DataTypes.DATE(3), allowNull: false },
      sampleRate: { type: DataTypes.DOUBLE, allowNull: false },
      sampleCount: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      sentAt: { type: DataTypes.DATE(3), allowNull: false },
      arrivedAt: { type: DataTypes.DATE(3), allowNull: false },
      commitId: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      digest: { type: DataTypes.STRING(32, true), allowNull: false },
      payload: { type: DataTypes.BLOB('medium'), allowNull: false },
    },
    { sequelize, tableName: 'frames' },
  )
}
