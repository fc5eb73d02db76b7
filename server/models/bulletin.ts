import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { BulletinContent, BulletinDraft, BulletinFigure, BulletinView } from '../../shared/schemas/bulletin.ts'

/** A draft, or an issue: then `content` is frozen and is never written again. */
export class Bulletin extends Model<InferAttributes<Bulletin>, InferCreationAttributes<Bulletin>> {
  declare id: CreationOptional<number>
  /** The first of the chain; null until it is known. */
  declare chainId: CreationOptional<number | null>
  declare status: BulletinView['status']
  declare number: CreationOptional<string | null>
  declare draft: BulletinDraft
  declare content: CreationOptional<BulletinContent | null>
  /** As they were frozen last. */
  declare figures: BulletinFigure[]
  declare frozenAt: Date | null
  declare replacesId: number | null
  declare authorId: number
  declare consentById: CreationOptional<number | null>
  declare aloneReason: CreationOptional<string | null>
  /** How many it went to. */
  declare people: CreationOptional<number | null>
  declare issuedAt: CreationOptional<Date | null>
  declare validUntil: CreationOptional<Date | null>
  declare nextIssueAt: CreationOptional<Date | null>
  declare remindedAt: CreationOptional<Date | null>
  declare cancelledAt: CreationOptional<Date | null>
  declare cancelReason: CreationOptional<string | null>
  declare cancelledById: CreationOptional<number | null>
  declare version: CreationOptional<number>
  declare createdAt: Date
  declare updatedAt: Date
}

export const defineBulletin = (sequelize: Sequelize): void => {
  Bulletin.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      chainId: DataTypes.INTEGER.UNSIGNED,
      status: { type: DataTypes.ENUM('draft', 'issued', 'replaced', 'cancelled'), allowNull: false },
      number: DataTypes.STRING(20),
      draft: { type: DataTypes.JSON, allowNull: false },
      content: DataTypes.JSON,
      figures: { type: DataTypes.JSON, allowNull: false },
      frozenAt: DataTypes.DATE(3),
      replacesId: DataTypes.INTEGER.UNSIGNED,
      authorId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      consentById: DataTypes.INTEGER.UNSIGNED,
      aloneReason: DataTypes.STRING(500),
      people: DataTypes.INTEGER.UNSIGNED,
      issuedAt: DataTypes.DATE(3),
      validUntil: DataTypes.DATE(3),
      nextIssueAt: DataTypes.DATE(3),
      remindedAt: DataTypes.DATE(3),
      cancelledAt: DataTypes.DATE(3),
      cancelReason: DataTypes.STRING(500),
      cancelledById: DataTypes.INTEGER.UNSIGNED,
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'bulletins' },
  )
}
