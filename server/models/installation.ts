import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** What this database is for: a demonstration or real use. One row, set once and never changed. */
export class Installation extends Model<InferAttributes<Installation>, InferCreationAttributes<Installation>> {
  declare id: number
  declare kind: 'demonstration' | 'real'
  declare schemaVersion: number
  declare createdAt: Date
}

export const defineInstallation = (sequelize: Sequelize): void => {
  Installation.init(
    {
      id: { type: DataTypes.TINYINT.UNSIGNED, primaryKey: true },
      kind: { type: DataTypes.ENUM('demonstration', 'real'), allowNull: false },
      schemaVersion: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'installation' },
  )
}
