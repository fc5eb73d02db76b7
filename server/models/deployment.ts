import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** The geometry of an array with its dates. In force: the latest validFrom without replacesId; a correction of the past has replacesId and is used by recompute runs only. */
export class Deployment extends Model<InferAttributes<Deployment>, InferCreationAttributes<Deployment>> {
  declare id: CreationOptional<number>
  declare stationId: number
  declare validFrom: Date
  declare recordedAt: Date
  declare replacesId: number | null
  declare waterDepth: number
  declare levelOfBed: number
  declare authorId: number | null
  declare reason: string
  declare surveyedOn: CreationOptional<string | null>
  declare notes: CreationOptional<string>
  /** Findings of the design check that were not good, with what was written. */
  declare resolved: CreationOptional<{ check: string; reason: string }[] | null>
}

export const defineDeployment = (sequelize: Sequelize): void => {
  Deployment.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      stationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      validFrom: { type: DataTypes.DATE(3), allowNull: false },
      recordedAt: { type: DataTypes.DATE(3), allowNull: false },
      replacesId: DataTypes.INTEGER.UNSIGNED,
      waterDepth: { type: DataTypes.DOUBLE, allowNull: false },
      levelOfBed: { type: DataTypes.DOUBLE, allowNull: false },
      authorId: DataTypes.INTEGER.UNSIGNED,
      reason: { type: DataTypes.STRING(500), allowNull: false },
      surveyedOn: DataTypes.DATEONLY,
      notes: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
      resolved: DataTypes.JSON,
    },
    { sequelize, tableName: 'deployments' },
  )
}
