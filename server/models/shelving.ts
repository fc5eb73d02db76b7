import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A limit put on the shelf for a while. Append-only but for its early end. */
export class Shelving extends Model<InferAttributes<Shelving>, InferCreationAttributes<Shelving>> {
  declare id: CreationOptional<number>
  declare limitId: number
  declare startsAt: Date
  declare endsAt: Date
  declare reason: string
  declare personId: number | null
  declare secondPersonId: number | null
  declare aloneReason: string | null
  declare endedAt: Date | null
  declare endedById: number | null
}

export const defineShelving = (sequelize: Sequelize): void => {
  Shelving.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      limitId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      startsAt: { type: DataTypes.DATE(3), allowNull: false },
      endsAt: { type: DataTypes.DATE(3), allowNull: false },
      reason: { type: DataTypes.STRING(500), allowNull: false },
      personId: DataTypes.INTEGER.UNSIGNED,
      secondPersonId: DataTypes.INTEGER.UNSIGNED,
      aloneReason: DataTypes.STRING(500),
      endedAt: DataTypes.DATE(3),
      endedById: DataTypes.INTEGER.UNSIGNED,
    },
    { sequelize, tableName: 'shelvings' },
  )
}
