import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A threshold that somebody set on a quantity of a subject. What it says stands in its versions. */
export class Limit extends Model<InferAttributes<Limit>, InferCreationAttributes<Limit>> {
  declare id: CreationOptional<number>
  declare subjectKind: 'station' | 'place' | 'system'
  declare subjectId: number | null
  declare limitClass: 'wave' | 'dataHealth'
  declare currentVersionId: number | null
  declare outOfServiceAt: Date | null
  declare outOfServiceReason: string | null
  declare outOfServiceById: number | null
  declare version: CreationOptional<number>
  declare createdAt: Date
  declare updatedAt: Date
  declare retiredAt: Date | null
}

export const defineLimit = (sequelize: Sequelize): void => {
  Limit.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      subjectKind: { type: DataTypes.ENUM('station', 'place', 'system'), allowNull: false },
      subjectId: DataTypes.INTEGER.UNSIGNED,
      limitClass: { type: DataTypes.ENUM('wave', 'dataHealth'), allowNull: false },
      currentVersionId: DataTypes.INTEGER.UNSIGNED,
      outOfServiceAt: DataTypes.DATE(3),
      outOfServiceReason: DataTypes.STRING(500),
      outOfServiceById: DataTypes.INTEGER.UNSIGNED,
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
      retiredAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'limits' },
  )
}
