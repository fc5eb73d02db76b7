import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { Configuration, ConfigurationChange } from '../../shared/schemas/configuration.ts'

/** A configuration's file that was put in force: what it changed, and all that stood before. */
export class ConfigurationRun extends Model<
  InferAttributes<ConfigurationRun>,
  InferCreationAttributes<ConfigurationRun>
> {
  declare id: CreationOptional<number>
  declare at: Date
  declare personId: number | null
  declare reason: string
  declare changes: ConfigurationChange[]
  declare before: Configuration
  declare rolledBackAt: Date | null
}

export const defineConfigurationRun = (sequelize: Sequelize): void => {
  ConfigurationRun.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      at: { type: DataTypes.DATE(3), allowNull: false },
      personId: DataTypes.INTEGER.UNSIGNED,
      reason: { type: DataTypes.STRING(500), allowNull: false },
      changes: { type: DataTypes.JSON, allowNull: false },
      before: { type: DataTypes.JSON, allowNull: false },
      rolledBackAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'configurationRuns' },
  )
}
