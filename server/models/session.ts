import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** One signed-in browser or wall. The token in the cookie names it and its `tokenId`, and it is asked on every request. */
export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  declare id: string
  declare personId: number
  declare kind: 'browser' | 'wall'
  declare tokenId: string
  declare createdAt: Date
  declare lastSeenAt: Date
  declare absoluteUntil: Date
  declare endedAt: Date | null
  declare endReason: string | null
  /** What the browser says of itself, in two words. */
  declare device: string | null
}

export const defineSession = (sequelize: Sequelize): void => {
  Session.init(
    {
      id: { type: DataTypes.STRING(43), primaryKey: true },
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      kind: { type: DataTypes.ENUM('browser', 'wall'), allowNull: false },
      tokenId: { type: DataTypes.STRING(43), allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      lastSeenAt: { type: DataTypes.DATE(3), allowNull: false },
      absoluteUntil: { type: DataTypes.DATE(3), allowNull: false },
      endedAt: DataTypes.DATE(3),
      endReason: DataTypes.STRING(40),
      device: DataTypes.STRING(60),
    },
    { sequelize, tableName: 'sessions' },
  )
}
