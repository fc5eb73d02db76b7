import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** The whole result of a window, deflated JSON of the estimator's answer. Has its own, shorter retention. */
export class EstimateDetail extends Model<InferAttributes<EstimateDetail>, InferCreationAttributes<EstimateDetail>> {
  declare stationId: number
  declare windowEndsAt: Date
  declare runId: number
  declare revision: number
  declare payload: Buffer
}

export const defineEstimateDetail = (sequelize: Sequelize): void => {
  EstimateDetail.init(
    {
      stationId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      windowEndsAt: { type: DataTypes.DATE(3), primaryKey: true },
      runId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      revision: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      payload: { type: DataTypes.BLOB('medium'), allowNull: false },
    },
    { sequelize, tableName: 'estimateDetails' },
  )
}
