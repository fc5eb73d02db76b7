import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Secrets that travel in links, each for one use: invitation, reset, set-up, confirmation of receipt. Only the hash is kept. */
export class LinkToken extends Model<InferAttributes<LinkToken>, InferCreationAttributes<LinkToken>> {
  declare id: CreationOptional<number>
  declare tokenHash: Buffer
  declare kind: 'invitation' | 'reset' | 'setUp' | 'receipt'
  declare personId: number | null
  declare subjectId: number | null
  declare createdAt: Date
  declare expiresAt: Date
  declare usedAt: Date | null
}

export const defineLinkToken = (sequelize: Sequelize): void => {
  LinkToken.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      tokenHash: { type: DataTypes.STRING(32, true), allowNull: false },
      kind: { type: DataTypes.ENUM('invitation', 'reset', 'setUp', 'receipt'), allowNull: false },
      personId: DataTypes.INTEGER.UNSIGNED,
      subjectId: DataTypes.BIGINT.UNSIGNED,
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      expiresAt: { type: DataTypes.DATE(3), allowNull: false },
      usedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'linkTokens' },
  )
}
