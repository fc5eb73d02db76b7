import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Values in short: `[value, sd, likelyFrom, likelyTo, flag]` by quantity, SI; what was not determined is missing. */
export type OutlookValues = Record<string, [number, number | null, number | null, number | null, number]>

/** What an estimate means at a place. `payload`: deflated JSON of the whole outlook; null once it is thinned. */
export class Outlook extends Model<InferAttributes<Outlook>, InferCreationAttributes<Outlook>> {
  declare placeId: number
  declare windowEndsAt: Date
  declare revision: number
  declare windowStartsAt: Date
  declare computedAt: Date
  declare stationId: number | null
  declare estimateRevision: number | null
  declare isSubstitute: CreationOptional<boolean>
  declare placeSettingsId: number
  declare softwareVersion: string
  declare qualityFlag: number
  declare reason: string | null
  declare figures: OutlookValues
  declare payload: Buffer | null
}

export const defineOutlook = (sequelize: Sequelize): void => {
  Outlook.init(
    {
      placeId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      windowEndsAt: { type: DataTypes.DATE(3), primaryKey: true },
      revision: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      windowStartsAt: { type: DataTypes.DATE(3), allowNull: false },
      computedAt: { type: DataTypes.DATE(3), allowNull: false },
      stationId: DataTypes.INTEGER.UNSIGNED,
      estimateRevision: DataTypes.INTEGER.UNSIGNED,
      isSubstitute: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      placeSettingsId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      softwareVersion: { type: DataTypes.STRING(40), allowNull: false },
      qualityFlag: { type: DataTypes.TINYINT.UNSIGNED, allowNull: false },
      reason: DataTypes.STRING(300),
      figures: { type: DataTypes.JSON, allowNull: false },
      payload: DataTypes.BLOB('medium'),
    },
    { sequelize, tableName: 'outlooks' },
  )
}
