import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A file of readings taken in. Undone by deleting its parts and marking its windows dirty. */
export class Import extends Model<InferAttributes<Import>, InferCreationAttributes<Import>> {
  declare id: CreationOptional<number>
  declare stationId: number
  declare kind: string
  declare fileName: string
  declare fileHash: Buffer
  declare status: 'running' | 'done' | 'failed' | 'undone'
  declare counts: Record<string, number> | null
  declare faults: unknown[] | null
  declare personId: number | null
  declare createdAt: Date
  declare finishedAt: Date | null
  declare undoneAt: Date | null
}

export const defineImport = (sequelize: Sequelize): void => {
  Import.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      stationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      kind: { type: DataTypes.STRING(40), allowNull: false },
      fileName: { type: DataTypes.STRING(255), allowNull: false },
      fileHash: { type: DataTypes.STRING(32, true), allowNull: false },
      status: { type: DataTypes.ENUM('running', 'done', 'failed', 'undone'), allowNull: false },
      counts: DataTypes.JSON,
      faults: DataTypes.JSON,
      personId: DataTypes.INTEGER.UNSIGNED,
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      finishedAt: DataTypes.DATE(3),
      undoneAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'imports' },
  )
}
