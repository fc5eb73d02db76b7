import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Work that takes long, with its progress and lease: a lease that ran out means that its worker is gone. */
export class LongJob extends Model<InferAttributes<LongJob>, InferCreationAttributes<LongJob>> {
  declare id: CreationOptional<number>
  declare kind: string
  declare title: string
  declare status: CreationOptional<'queued' | 'running' | 'done' | 'failed' | 'cancelled'>
  declare progress: CreationOptional<number>
  declare detail: string | null
  declare parameters: Record<string, unknown> | null
  declare resultPath: string | null
  declare leaseUntil: Date | null
  declare cancelRequestedAt: Date | null
  declare expiresAt: Date | null
  declare personId: number | null
  declare createdAt: Date
  declare startedAt: Date | null
  declare updatedAt: Date
  declare finishedAt: Date | null
}

export const defineLongJob = (sequelize: Sequelize): void => {
  LongJob.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      kind: { type: DataTypes.STRING(40), allowNull: false },
      title: { type: DataTypes.STRING(200), allowNull: false },
      status: {
        type: DataTypes.ENUM('queued', 'running', 'done', 'failed', 'cancelled'),
        allowNull: false,
        defaultValue: 'queued',
      },
      progress: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0 },
      detail: DataTypes.STRING(500),
      parameters: DataTypes.JSON,
      resultPath: DataTypes.STRING(255),
      leaseUntil: DataTypes.DATE(3),
      cancelRequestedAt: DataTypes.DATE(3),
      expiresAt: DataTypes.DATE(3),
      personId: DataTypes.INTEGER.UNSIGNED,
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      startedAt: DataTypes.DATE(3),
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
      finishedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'longJobs' },
  )
}
