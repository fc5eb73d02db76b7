import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { Condition, Priority, Recipients, TimeSpan } from '../../shared/schemas/limit.ts'

/** What a limit says from a moment on. Never edited: a change makes the next number. */
export class LimitVersion extends Model<InferAttributes<LimitVersion>, InferCreationAttributes<LimitVersion>> {
  declare id: CreationOptional<number>
  declare limitId: number
  declare number: number
  declare validFrom: Date
  declare title: string | null
  declare condition: Condition
  declare priority: Priority
  declare steps: Recipients
  declare schedule: TimeSpan | null
  declare note: string
  declare toCheck: string
  declare reviewOn: string | null
  declare isPublished: boolean
  declare authorId: number | null
  declare reason: string
  declare consentById: number | null
  declare aloneReason: string | null
}

export const defineLimitVersion = (sequelize: Sequelize): void => {
  LimitVersion.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      limitId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      number: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      validFrom: { type: DataTypes.DATE(3), allowNull: false },
      title: DataTypes.STRING(80),
      condition: { type: DataTypes.JSON, allowNull: false },
      priority: { type: DataTypes.ENUM('low', 'medium', 'high', 'urgent'), allowNull: false },
      steps: { type: DataTypes.JSON, allowNull: false },
      schedule: DataTypes.JSON,
      note: { type: DataTypes.STRING(1000), allowNull: false },
      toCheck: { type: DataTypes.STRING(500), allowNull: false },
      reviewOn: DataTypes.DATEONLY,
      isPublished: { type: DataTypes.BOOLEAN, allowNull: false },
      authorId: DataTypes.INTEGER.UNSIGNED,
      reason: { type: DataTypes.STRING(500), allowNull: false },
      consentById: DataTypes.INTEGER.UNSIGNED,
      aloneReason: DataTypes.STRING(500),
    },
    { sequelize, tableName: 'limitVersions' },
  )
}
