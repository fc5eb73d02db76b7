import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { StationSettingsContent } from '../../shared/schemas/stationSettings.ts'

/** How a station is computed and judged. A version is never edited; each estimate names the one it used. */
export class StationSettings extends Model<InferAttributes<StationSettings>, InferCreationAttributes<StationSettings>> {
  declare id: CreationOptional<number>
  declare stationId: number
  declare validFrom: Date
  /** Hz; null: that of the station when it was made. */
  declare sampleRate: CreationOptional<number | null>
  declare content: StationSettingsContent
  declare authorId: number | null
  declare reason: string
}

export const defineStationSettings = (sequelize: Sequelize): void => {
  StationSettings.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      stationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      validFrom: { type: DataTypes.DATE(3), allowNull: false },
      sampleRate: DataTypes.DOUBLE,
      content: { type: DataTypes.JSON, allowNull: false },
      authorId: DataTypes.INTEGER.UNSIGNED,
      reason: { type: DataTypes.STRING(500), allowNull: false },
    },
    { sequelize, tableName: 'stationSettings' },
  )
}
