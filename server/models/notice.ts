import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { NoticeContent, NoticeKind } from '../../shared/schemas/placeNotice.ts'

/** Who moved the end, when, to when (ISO 8601 UTC) and why. */
export interface NoticeExtended {
  at: string
  personId: number
  expiresAt: string
  reason: string
}

/** A flag, closure or advisory at a place. It never goes by itself: somebody withdraws it or another flag replaces it. */
export class Notice extends Model<InferAttributes<Notice>, InferCreationAttributes<Notice>> {
  declare id: CreationOptional<number>
  declare placeId: number
  declare kind: NoticeKind
  declare content: NoticeContent
  declare startsAt: Date
  declare expiresAt: Date | null
  declare reason: string
  declare personId: number | null
  declare extensions: NoticeExtended[]
  declare warnedAt: CreationOptional<Date | null>
  declare expiredToldAt: CreationOptional<Date | null>
  declare withdrawnAt: CreationOptional<Date | null>
  declare withdrawnById: CreationOptional<number | null>
  declare withdrawReason: CreationOptional<string | null>
  declare replacedById: CreationOptional<number | null>
  declare version: CreationOptional<number>
  declare createdAt: Date
  declare updatedAt: Date
}

export const defineNotice = (sequelize: Sequelize): void => {
  Notice.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      placeId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      kind: { type: DataTypes.ENUM('flag', 'closure', 'advisory'), allowNull: false },
      content: { type: DataTypes.JSON, allowNull: false },
      startsAt: { type: DataTypes.DATE(3), allowNull: false },
      expiresAt: DataTypes.DATE(3),
      reason: { type: DataTypes.STRING(500), allowNull: false },
      personId: DataTypes.INTEGER.UNSIGNED,
      extensions: { type: DataTypes.JSON, allowNull: false },
      warnedAt: DataTypes.DATE(3),
      expiredToldAt: DataTypes.DATE(3),
      withdrawnAt: DataTypes.DATE(3),
      withdrawnById: DataTypes.INTEGER.UNSIGNED,
      withdrawReason: DataTypes.STRING(500),
      replacedById: DataTypes.INTEGER.UNSIGNED,
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'notices' },
  )
}
