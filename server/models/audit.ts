import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Who changed what and when. Written in the transaction of the change, without seal; one job seals committed rows into a chain of hashes. */
export class Audit extends Model<InferAttributes<Audit>, InferCreationAttributes<Audit>> {
  declare id: CreationOptional<number>
  declare at: Date
  declare personId: number | null
  declare action: string
  declare entity: string
  declare entityId: string
  declare before?: unknown
  declare after?: unknown
  declare sealNumber: number | null
  declare hash: Buffer | null
}

export const defineAudit = (sequelize: Sequelize): void => {
  Audit.init(
    {
      id: { type: DataTypes.BIGINT.UNSIGNED, autoIncrement: true, primaryKey: true },
      at: { type: DataTypes.DATE(3), allowNull: false },
      personId: DataTypes.INTEGER.UNSIGNED,
      action: { type: DataTypes.STRING(60), allowNull: false },
      entity: { type: DataTypes.STRING(40), allowNull: false },
      entityId: { type: DataTypes.STRING(80), allowNull: false },
      before: DataTypes.JSON,
      after: DataTypes.JSON,
      sealNumber: DataTypes.BIGINT.UNSIGNED,
      hash: DataTypes.STRING(32, true),
    },
    { sequelize, tableName: 'audits' },
  )
}
