import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** One minute of all sensors of a station, packed. What comes after the minute was used becomes a further part. */
export class ReadingBlock extends Model<InferAttributes<ReadingBlock>, InferCreationAttributes<ReadingBlock>> {
  declare stationId: number
  declare startsAt: Date
  declare part: number
  declare deploymentId: number
  declare firstCommitId: number
  declare lastCommitId: number
  declare source: 'live' | 'late' | 'import' | 'demonstration'
  declare importId: number | null
  declare sampleRate: number
  declare sampleCount: number
  declare missingCount: number
  declare clockOffset: number | null
  declare digest: Buffer
  declare payload: Buffer
}

export const defineReadingBlock = (sequelize: Sequelize): void => {
  ReadingBlock.init(
    {
      stationId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      startsAt: { type: DataTypes.DATE(3), primaryKey: true },
      part: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      deploymentId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      firstCommitId: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      lastCommitId: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      source: { type: DataTypes.ENUM('live', 'late', 'import', 'demonstration'), allowNull: false },
      importId: DataTypes.INTEGER.UNSIGNED,
      sampleRate: { type: DataTypes.DOUBLE, allowNull: false },
      sampleCount: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      missingCount: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      clockOffset: DataTypes.DOUBLE,
      digest: { type: DataTypes.STRING(32, true), allowNull: false },
      payload: { type: DataTypes.BLOB('medium'), allowNull: false },
    },
    { sequelize, tableName: 'readingBlocks' },
  )
}
