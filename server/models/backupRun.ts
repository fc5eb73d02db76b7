import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A backup that was made, or a restore that was tried, and how it ended. */
export class BackupRun extends Model<InferAttributes<BackupRun>, InferCreationAttributes<BackupRun>> {
  declare id: CreationOptional<number>
  declare kind: 'backup' | 'restoreTest'
  declare startedAt: Date
  declare finishedAt: Date
  declare isGood: boolean
  /** Name of the manifest. */
  declare fileName: string | null
  declare bytes: number | null
  declare rows: number | null
  /** Why it failed, or what differs. */
  declare says: string | null
}

export const defineBackupRun = (sequelize: Sequelize): void => {
  BackupRun.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      kind: { type: DataTypes.ENUM('backup', 'restoreTest'), allowNull: false },
      startedAt: { type: DataTypes.DATE(3), allowNull: false },
      finishedAt: { type: DataTypes.DATE(3), allowNull: false },
      isGood: { type: DataTypes.BOOLEAN, allowNull: false },
      fileName: DataTypes.STRING(120),
      bytes: DataTypes.BIGINT.UNSIGNED,
      rows: DataTypes.BIGINT.UNSIGNED,
      says: DataTypes.STRING(1000),
    },
    { sequelize, tableName: 'backupRuns' },
  )
}
