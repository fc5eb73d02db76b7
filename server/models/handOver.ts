import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { HandOverSheet } from '../../shared/schemas/watch.ts'

/** From one watch to the next. The sheet is frozen; notes that were owed are written into it once. */
export class HandOver extends Model<InferAttributes<HandOver>, InferCreationAttributes<HandOver>> {
  declare id: CreationOptional<number>
  declare fromWatchId: number
  declare toWatchId: number
  declare sheet: HandOverSheet
  /** Null while notes are owed. */
  declare signedFromAt: Date | null
  declare signedToAt: Date
  declare reason: CreationOptional<string | null>
}

export const defineHandOver = (sequelize: Sequelize): void => {
  HandOver.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      fromWatchId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      toWatchId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      sheet: { type: DataTypes.JSON, allowNull: false },
      signedFromAt: DataTypes.DATE(3),
      signedToAt: { type: DataTypes.DATE(3), allowNull: false },
      reason: DataTypes.STRING(500),
    },
    { sequelize, tableName: 'handOvers' },
  )
}
