import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { UploadLayout, UploadReport, UploadView } from '../../shared/schemas/stationSetUpUploads.ts'

/** A file that was brought in, until it is stored or thrown away. */
export class Upload extends Model<InferAttributes<Upload>, InferCreationAttributes<Upload>> {
  declare id: CreationOptional<number>
  declare stationId: number
  declare kind: 'readings' | 'auxiliary'
  declare fileName: string
  /** Its name in the folder of uploads. */
  declare storedAs: string
  declare bytes: number
  declare fileHash: Buffer
  declare state: UploadView['state']
  declare layout: UploadLayout | null
  declare report: UploadReport | null
  declare jobId: number | null
  declare importId: number | null
  declare personId: number | null
  declare createdAt: Date
  declare updatedAt: Date
  declare retiredAt: Date | null
}

export const defineUpload = (sequelize: Sequelize): void => {
  Upload.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      stationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      kind: { type: DataTypes.ENUM('readings', 'auxiliary'), allowNull: false },
      fileName: { type: DataTypes.STRING(255), allowNull: false },
      storedAs: { type: DataTypes.STRING(64), allowNull: false },
      bytes: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      fileHash: { type: DataTypes.STRING(32, true), allowNull: false },
      state: {
        type: DataTypes.ENUM('received', 'checking', 'checked', 'storing', 'stored', 'failed', 'cancelled'),
        allowNull: false,
      },
      layout: DataTypes.JSON,
      report: DataTypes.JSON,
      jobId: DataTypes.INTEGER.UNSIGNED,
      importId: DataTypes.INTEGER.UNSIGNED,
      personId: DataTypes.INTEGER.UNSIGNED,
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
      retiredAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'uploads' },
  )
}
