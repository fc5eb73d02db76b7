import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { AlertState, Priority } from '../../shared/schemas/limit.ts'

/** One occurrence of a limit exceeded. `openKey` lets one be open for a limit; an exercise counts apart. */
export class Alert extends Model<InferAttributes<Alert>, InferCreationAttributes<Alert>> {
  declare id: CreationOptional<number>
  declare limitId: number
  declare limitVersionId: number
  declare state: AlertState
  declare priority: Priority
  declare crossedAt: Date
  declare raisedAt: Date
  declare announcedAt: Date | null
  declare windowEndsAt: Date
  declare revision: number
  declare value: number | null
  declare valueSd: number | null
  declare extremeValue: number | null
  declare extremeAt: Date | null
  declare acknowledgedAt: Date | null
  declare acknowledgedById: number | null
  declare clearedAt: Date | null
  declare closedAt: Date | null
  declare isExercise: boolean
  declare version: CreationOptional<number>
  /** Made by the database. */
  declare openKey: CreationOptional<string | null>
}

export const defineAlert = (sequelize: Sequelize): void => {
  Alert.init(
    {
      id: { type: DataTypes.BIGINT.UNSIGNED, autoIncrement: true, primaryKey: true },
      limitId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      limitVersionId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      state: { type: DataTypes.STRING(24), allowNull: false },
      priority: { type: DataTypes.ENUM('low', 'medium', 'high', 'urgent'), allowNull: false },
      crossedAt: { type: DataTypes.DATE(3), allowNull: false },
      raisedAt: { type: DataTypes.DATE(3), allowNull: false },
      announcedAt: DataTypes.DATE(3),
      windowEndsAt: { type: DataTypes.DATE(3), allowNull: false },
      revision: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      value: DataTypes.DOUBLE,
      valueSd: DataTypes.DOUBLE,
      extremeValue: DataTypes.DOUBLE,
      extremeAt: DataTypes.DATE(3),
      acknowledgedAt: DataTypes.DATE(3),
      acknowledgedById: DataTypes.INTEGER.UNSIGNED,
      clearedAt: DataTypes.DATE(3),
      closedAt: DataTypes.DATE(3),
      isExercise: { type: DataTypes.BOOLEAN, allowNull: false },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      openKey: DataTypes.STRING(24),
    },
    { sequelize, tableName: 'alerts' },
  )
}
