import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** One instrument, whichever deployment it stands in. */
export class Sensor extends Model<InferAttributes<Sensor>, InferCreationAttributes<Sensor>> {
  declare id: CreationOptional<number>
  declare stationId: number
  declare serial: string
  declare kind: 'pressure' | 'surface'
  declare dueDates: Record<string, string> | null
  declare version: CreationOptional<number>
  declare createdAt: Date
  declare updatedAt: Date
  declare retiredAt: Date | null
}

export const defineSensor = (sequelize: Sequelize): void => {
  Sensor.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      stationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      serial: { type: DataTypes.STRING(40), allowNull: false },
      kind: { type: DataTypes.ENUM('pressure', 'surface'), allowNull: false },
      dueDates: DataTypes.JSON,
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
      retiredAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'sensors' },
  )
}
