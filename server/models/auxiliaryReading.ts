import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Water level, tide, pressure of the air and wind, each with its own time and quality. */
export class AuxiliaryReading extends Model<
  InferAttributes<AuxiliaryReading>,
  InferCreationAttributes<AuxiliaryReading>
> {
  declare stationId: number
  declare kind: 'waterLevel' | 'tide' | 'barometer' | 'windSpeed' | 'windFrom'
  declare takenAt: Date
  declare value: number
  declare sd: number | null
  declare qualityFlag: number
  declare importId: number | null
  declare source: CreationOptional<'push' | 'entered' | 'file'>
}

export const defineAuxiliaryReading = (sequelize: Sequelize): void => {
  AuxiliaryReading.init(
    {
      stationId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      kind: { type: DataTypes.ENUM('waterLevel', 'tide', 'barometer', 'windSpeed', 'windFrom'), primaryKey: true },
      takenAt: { type: DataTypes.DATE(3), primaryKey: true },
      value: { type: DataTypes.DOUBLE, allowNull: false },
      sd: DataTypes.DOUBLE,
      qualityFlag: { type: DataTypes.TINYINT.UNSIGNED, allowNull: false },
      importId: DataTypes.INTEGER.UNSIGNED,
      source: { type: DataTypes.ENUM('push', 'entered', 'file'), allowNull: false, defaultValue: 'entered' },
    },
    { sequelize, tableName: 'auxiliaryReadings' },
  )
}
