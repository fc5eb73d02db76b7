import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { PlaceKind } from '../../shared/schemas/placeQuantity.ts'
import type { Team } from '../../shared/schemas/session.ts'

/** Where the sea's effect is judged. What it is in numbers stands in its settings. */
export class Place extends Model<InferAttributes<Place>, InferCreationAttributes<Place>> {
  declare id: CreationOptional<number>
  declare code: string
  declare shortName: string
  declare name: string
  declare kind: PlaceKind
  declare team: Team | null
  declare latitude: number
  declare longitude: number
  declare areaPolygon: [number, number][] | null
  declare position: number
  declare noticeListIds: number[]
  declare version: CreationOptional<number>
  declare createdAt: Date
  declare updatedAt: Date
  declare retiredAt: CreationOptional<Date | null>
}

export const definePlace = (sequelize: Sequelize): void => {
  Place.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      code: { type: DataTypes.STRING(4), allowNull: false },
      shortName: { type: DataTypes.STRING(14), allowNull: false },
      name: { type: DataTypes.STRING(40), allowNull: false },
      kind: { type: DataTypes.ENUM('entrance', 'breakwater', 'berth', 'beach'), allowNull: false },
      team: DataTypes.ENUM('harbour', 'beach safety'),
      latitude: { type: DataTypes.DOUBLE, allowNull: false },
      longitude: { type: DataTypes.DOUBLE, allowNull: false },
      areaPolygon: DataTypes.JSON,
      position: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      noticeListIds: { type: DataTypes.JSON, allowNull: false },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
      retiredAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'places' },
  )
}
