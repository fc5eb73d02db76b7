import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Keys by which a station proves itself on the telemetry link. 32 random bytes, so SHA-256 is enough and connecting costs no bcrypt. */
export class StationKey extends Model<InferAttributes<StationKey>, InferCreationAttributes<StationKey>> {
  declare id: CreationOptional<number>
  declare stationId: number
  declare prefix: string
  declare secretHash: Buffer
  declare createdAt: Date
  declare authorId: number | null
  declare validUntil: Date | null
  declare revokedAt: Date | null
  declare lastUsedAt: Date | null
}

export const defineStationKey = (sequelize: Sequelize): void => {
  StationKey.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      stationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      prefix: { type: DataTypes.STRING(16), allowNull: false },
      secretHash: { type: DataTypes.STRING(32, true), allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      authorId: DataTypes.INTEGER.UNSIGNED,
      validUntil: DataTypes.DATE(3),
      revokedAt: DataTypes.DATE(3),
      lastUsedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'stationKeys' },
  )
}
