import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A list of people who get e-mails. */
export class DistributionList extends Model<
  InferAttributes<DistributionList>,
  InferCreationAttributes<DistributionList>
> {
  declare id: CreationOptional<number>
  declare name: string
  declare purpose: string
  declare isSafety: boolean
  declare version: CreationOptional<number>
  declare createdAt: Date
  declare updatedAt: Date
  declare retiredAt: Date | null
}

export const defineDistributionList = (sequelize: Sequelize): void => {
  DistributionList.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      name: { type: DataTypes.STRING(80), allowNull: false },
      purpose: { type: DataTypes.STRING(300), allowNull: false },
      isSafety: { type: DataTypes.BOOLEAN, allowNull: false },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
      retiredAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'lists' },
  )
}
