import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A confirmed offset of one sensor's clock, applied once, before the fit: a value stamped t was taken at t + offsetSeconds. */
export class ClockOffset extends Model<InferAttributes<ClockOffset>, InferCreationAttributes<ClockOffset>> {
  declare id: CreationOptional<number>
  declare sensorId: number
  declare validFrom: Date
  declare offsetSeconds: number
  declare sd: number
  declare confirmedById: number | null
  declare reason: string
  /** When it was confirmed: an estimate made before is computed again without it. */
  declare recordedAt: CreationOptional<Date>
}

export const defineClockOffset = (sequelize: Sequelize): void => {
  ClockOffset.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      sensorId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      validFrom: { type: DataTypes.DATE(3), allowNull: false },
      offsetSeconds: { type: DataTypes.DOUBLE, allowNull: false },
      sd: { type: DataTypes.DOUBLE, allowNull: false },
      confirmedById: DataTypes.INTEGER.UNSIGNED,
      reason: { type: DataTypes.STRING(500), allowNull: false },
      recordedAt: { type: DataTypes.DATE(3), allowNull: false, defaultValue: DataTypes.NOW },
    },
    { sequelize, tableName: 'clockOffsets' },
  )
}
