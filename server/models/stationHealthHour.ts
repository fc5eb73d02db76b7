import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** What was expected of a sensor in an hour and what came. */
export class StationHealthHour extends Model<
  InferAttributes<StationHealthHour>,
  InferCreationAttributes<StationHealthHour>
> {
  declare stationId: number
  declare sensorId: number
  declare hour: Date
  declare expected: CreationOptional<number>
  declare received: CreationOptional<number>
  declare late: CreationOptional<number>
  declare repeated: CreationOptional<number>
  declare conflicting: CreationOptional<number>
  declare clockOffset: number | null
  declare latencyP95: number | null
}

export const defineStationHealthHour = (sequelize: Sequelize): void => {
  StationHealthHour.init(
    {
      stationId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      sensorId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      hour: { type: DataTypes.DATE(3), primaryKey: true },
      expected: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      received: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      late: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      repeated: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      conflicting: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      clockOffset: DataTypes.DOUBLE,
      latencyP95: DataTypes.DOUBLE,
    },
    { sequelize, tableName: 'stationHealthHours' },
  )
}
