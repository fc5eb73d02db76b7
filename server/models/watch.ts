import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** One person's time on watch. `openKey` lets one be open at most. */
export class Watch extends Model<InferAttributes<Watch>, InferCreationAttributes<Watch>> {
  declare id: CreationOptional<number>
  declare personId: number
  declare name: string
  declare startedAt: Date
  declare endedAt: CreationOptional<Date | null>
  /** For the next officer, by item; written during the watch. */
  declare notes: Record<string, string>
  declare expected: string
  declare openKey: CreationOptional<number | null>
}

export const defineWatch = (sequelize: Sequelize): void => {
  Watch.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      name: { type: DataTypes.STRING(20), allowNull: false },
      startedAt: { type: DataTypes.DATE(3), allowNull: false },
      endedAt: DataTypes.DATE(3),
      notes: { type: DataTypes.JSON, allowNull: false },
      expected: { type: DataTypes.STRING(2000), allowNull: false },
      openKey: DataTypes.TINYINT,
    },
    { sequelize, tableName: 'watches' },
  )
}
