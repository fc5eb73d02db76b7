import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { AlertState } from '../../shared/schemas/limit.ts'

/** Where a limit stands in its life cycle and how far it has been judged. Locked while it is judged. */
export class LimitState extends Model<InferAttributes<LimitState>, InferCreationAttributes<LimitState>> {
  declare limitId: number
  declare state: AlertState
  declare since: Date
  declare isActive: boolean
  declare activeSince: Date | null
  declare crossedAt: Date | null
  declare pendingSince: Date | null
  declare lastKnownAt: Date | null
  declare lastWindowEndsAt: Date | null
  declare lastRevision: number | null
  declare value: number | null
  declare valueSd: number | null
  declare notJudged: string | null
}

export const defineLimitState = (sequelize: Sequelize): void => {
  LimitState.init(
    {
      limitId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      state: { type: DataTypes.STRING(24), allowNull: false },
      since: { type: DataTypes.DATE(3), allowNull: false },
      isActive: { type: DataTypes.BOOLEAN, allowNull: false },
      activeSince: DataTypes.DATE(3),
      crossedAt: DataTypes.DATE(3),
      pendingSince: DataTypes.DATE(3),
      lastKnownAt: DataTypes.DATE(3),
      lastWindowEndsAt: DataTypes.DATE(3),
      lastRevision: DataTypes.INTEGER.UNSIGNED,
      value: DataTypes.DOUBLE,
      valueSd: DataTypes.DOUBLE,
      notJudged: DataTypes.STRING(20),
    },
    { sequelize, tableName: 'limitStates' },
  )
}
