import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A place with one array of sensors and one telemetry link. */
export class Station extends Model<InferAttributes<Station>, InferCreationAttributes<Station>> {
  declare id: CreationOptional<number>
  declare code: string
  declare shortName: string
  declare name: string
  declare latitude: number
  declare longitude: number
  declare sampleRate: number
  declare datumName: CreationOptional<string>
  declare datumOffset: CreationOptional<number>
  declare datumSurveyedOn: CreationOptional<string | null>
  declare state: CreationOptional<'active' | 'maintenance' | 'retired'>
  declare staleAfterSeconds: number
  declare areaPolygon?: unknown
  declare notes: CreationOptional<string>
  declare version: CreationOptional<number>
  declare createdAt: Date
  declare updatedAt: Date
  declare retiredAt: Date | null
}

export const defineStation = (sequelize: Sequelize): void => {
  Station.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      code: { type: DataTypes.STRING(16), allowNull: false },
      shortName: { type: DataTypes.STRING(24), allowNull: false },
      name: { type: DataTypes.STRING(80), allowNull: false },
      latitude: { type: DataTypes.DOUBLE, allowNull: false },
      longitude: { type: DataTypes.DOUBLE, allowNull: false },
      sampleRate: { type: DataTypes.DOUBLE, allowNull: false },
      datumName: { type: DataTypes.STRING(40), allowNull: false, defaultValue: 'local datum' },
      datumOffset: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0 },
      datumSurveyedOn: DataTypes.DATEONLY,
      state: { type: DataTypes.ENUM('active', 'maintenance', 'retired'), allowNull: false, defaultValue: 'active' },
      staleAfterSeconds: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      areaPolygon: DataTypes.JSON,
      notes: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
      retiredAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'stations' },
  )
}
