import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Settings of the whole installation. A version is never edited: the newest of a group in force is the setting. */
export class SettingVersion extends Model<InferAttributes<SettingVersion>, InferCreationAttributes<SettingVersion>> {
  declare id: CreationOptional<number>
  declare groupName: string
  declare content: Record<string, unknown>
  declare validFrom: Date
  declare authorId: number | null
  declare reason: string
}

export const defineSettingVersion = (sequelize: Sequelize): void => {
  SettingVersion.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      groupName: { type: DataTypes.STRING(40), allowNull: false },
      content: { type: DataTypes.JSON, allowNull: false },
      validFrom: { type: DataTypes.DATE(3), allowNull: false },
      authorId: DataTypes.INTEGER.UNSIGNED,
      reason: { type: DataTypes.STRING(500), allowNull: false },
    },
    { sequelize, tableName: 'settingVersions' },
  )
}
