import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { AlertEventKind } from '../../shared/schemas/alert.ts'

/** What happened to an alert. Append-only. */
export class AlertEvent extends Model<InferAttributes<AlertEvent>, InferCreationAttributes<AlertEvent>> {
  declare id: CreationOptional<number>
  declare alertId: number
  declare at: Date
  declare kind: AlertEventKind
  declare text: string
  declare personId: number | null
  declare note: string | null
  declare value: number | null
}

export const defineAlertEvent = (sequelize: Sequelize): void => {
  AlertEvent.init(
    {
      id: { type: DataTypes.BIGINT.UNSIGNED, autoIncrement: true, primaryKey: true },
      alertId: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      at: { type: DataTypes.DATE(3), allowNull: false },
      kind: { type: DataTypes.STRING(24), allowNull: false },
      text: { type: DataTypes.STRING(400), allowNull: false },
      personId: DataTypes.INTEGER.UNSIGNED,
      note: DataTypes.STRING(500),
      value: DataTypes.DOUBLE,
    },
    { sequelize, tableName: 'alertEvents' },
  )
}
