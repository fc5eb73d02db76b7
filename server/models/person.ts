import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** All people. Without a role a person only gets e-mails. */
export class Person extends Model<InferAttributes<Person>, InferCreationAttributes<Person>> {
  declare id: CreationOptional<number>
  declare name: string
  declare email: string | null
  declare role: 'admin' | 'operator' | 'partner' | null
  declare team: 'harbour' | 'beach safety' | null
  declare passwordHash: string | null
  /** Sealed with a key of the installation's secret. In force only where `totpSince` stands. */
  declare totpSecret: string | null
  declare totpSince: Date | null
  /** The newest step whose code was taken: no code is taken twice. */
  declare totpLastStep: number | null
  declare disabledAt: Date | null
  declare preferences: Record<string, unknown> | null
  declare timeZone: CreationOptional<string>
  declare hours: Record<string, unknown> | null
  declare deputyId: number | null
  declare mailHealth: CreationOptional<string>
  declare version: CreationOptional<number>
  declare createdAt: Date
  declare updatedAt: Date
}

export const definePerson = (sequelize: Sequelize): void => {
  Person.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      name: { type: DataTypes.STRING(80), allowNull: false },
      email: DataTypes.STRING(254),
      role: DataTypes.ENUM('admin', 'operator', 'partner'),
      team: DataTypes.ENUM('harbour', 'beach safety'),
      passwordHash: DataTypes.STRING(72),
      totpSecret: DataTypes.STRING(160),
      totpSince: DataTypes.DATE(3),
      totpLastStep: DataTypes.BIGINT.UNSIGNED,
      disabledAt: DataTypes.DATE(3),
      preferences: DataTypes.JSON,
      timeZone: { type: DataTypes.STRING(60), allowNull: false, defaultValue: 'Etc/UTC' },
      hours: DataTypes.JSON,
      deputyId: DataTypes.INTEGER.UNSIGNED,
      mailHealth: { type: DataTypes.STRING(20), allowNull: false, defaultValue: 'unknown' },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'people' },
  )
}
