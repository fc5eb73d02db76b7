import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A step of who is told, with its stored time, so that a restart loses no timer. */
export class Escalation extends Model<InferAttributes<Escalation>, InferCreationAttributes<Escalation>> {
  declare alertId: number
  declare step: number
  declare dueAt: Date
  declare sentAt: Date | null
  declare nextReminderAt: Date | null
  declare satisfiedAt: Date | null
  declare satisfiedById: number | null
  declare endedAt: Date | null
}

export const defineEscalation = (sequelize: Sequelize): void => {
  Escalation.init(
    {
      alertId: { type: DataTypes.BIGINT.UNSIGNED, primaryKey: true },
      step: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      dueAt: { type: DataTypes.DATE(3), allowNull: false },
      sentAt: DataTypes.DATE(3),
      nextReminderAt: DataTypes.DATE(3),
      satisfiedAt: DataTypes.DATE(3),
      satisfiedById: DataTypes.INTEGER.UNSIGNED,
      endedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'escalations' },
  )
}
