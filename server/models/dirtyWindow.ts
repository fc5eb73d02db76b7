import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Windows whose readings changed after they were computed. */
export class DirtyWindow extends Model<InferAttributes<DirtyWindow>, InferCreationAttributes<DirtyWindow>> {
  declare stationId: number
  declare windowEndsAt: Date
  declare cause: 'late' | 'import' | 'undo' | 'recompute'
  declare notedAt: Date
}

export const defineDirtyWindow = (sequelize: Sequelize): void => {
  DirtyWindow.init(
    {
      stationId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      windowEndsAt: { type: DataTypes.DATE(3), primaryKey: true },
      cause: { type: DataTypes.ENUM('late', 'import', 'undo', 'recompute'), allowNull: false },
      notedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'dirtyWindows' },
  )
}
