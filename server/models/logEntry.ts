import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** The watch log. Append-only: a correction is a new entry that names the one it corrects. */
export class LogEntry extends Model<InferAttributes<LogEntry>, InferCreationAttributes<LogEntry>> {
  declare id: CreationOptional<number>
  declare at: Date
  declare kind: string
  declare personId: number | null
  declare text: string
  declare figures?: unknown
  declare correctsId: number | null
  declare links?: unknown
}

export const defineLogEntry = (sequelize: Sequelize): void => {
  LogEntry.init(
    {
      id: { type: DataTypes.BIGINT.UNSIGNED, autoIncrement: true, primaryKey: true },
      at: { type: DataTypes.DATE(3), allowNull: false },
      kind: { type: DataTypes.STRING(40), allowNull: false },
      personId: DataTypes.INTEGER.UNSIGNED,
      text: { type: DataTypes.STRING(4000), allowNull: false },
      figures: DataTypes.JSON,
      correctsId: DataTypes.BIGINT.UNSIGNED,
      links: DataTypes.JSON,
    },
    { sequelize, tableName: 'logEntries' },
  )
}
