import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A file that belongs to a line of the watch log; it lies in the folder of data, outside everything that is served. */
export class Attachment extends Model<InferAttributes<Attachment>, InferCreationAttributes<Attachment>> {
  declare id: CreationOptional<number>
  declare entryId: number
  declare name: string
  declare mediaType: string
  declare bytes: number
  declare sha256: string
  /** Within the folder of data. */
  declare path: string
  declare createdAt: Date
}

export const defineAttachment = (sequelize: Sequelize): void => {
  Attachment.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      entryId: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      name: { type: DataTypes.STRING(200), allowNull: false },
      mediaType: { type: DataTypes.STRING(60), allowNull: false },
      bytes: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      sha256: { type: DataTypes.CHAR(64), allowNull: false },
      path: { type: DataTypes.STRING(255), allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'attachments' },
  )
}
