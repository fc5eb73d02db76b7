import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { PlaceSettingsContent } from '../../shared/schemas/placeSettings.ts'

/** What a place is in numbers from a moment on. Never edited: a change makes the next version. */
export class PlaceSettings extends Model<InferAttributes<PlaceSettings>, InferCreationAttributes<PlaceSettings>> {
  declare id: CreationOptional<number>
  declare placeId: number
  declare validFrom: Date
  declare content: PlaceSettingsContent
  declare authorId: number | null
  declare reason: string
  declare createdAt: Date
}

export const definePlaceSettings = (sequelize: Sequelize): void => {
  PlaceSettings.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      placeId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      validFrom: { type: DataTypes.DATE(3), allowNull: false },
      content: { type: DataTypes.JSON, allowNull: false },
      authorId: DataTypes.INTEGER.UNSIGNED,
      reason: { type: DataTypes.STRING(500), allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'placeSettings' },
  )
}
