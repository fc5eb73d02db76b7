import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { SensorPosition } from '../../shared/schemas/stationSetUpDeployments.ts'

/** Where one sensor stands in a deployment. `letter` is its id on the wire; rows are in the order of the packed readings. */
export class DeploymentSensor extends Model<
  InferAttributes<DeploymentSensor>,
  InferCreationAttributes<DeploymentSensor>
> {
  declare id: CreationOptional<number>
  declare deploymentId: number
  declare sensorId: number
  declare position: number
  declare letter: string
  declare east: number
  declare north: number
  declare heightAboveBed: number
  declare positionSd: number
  declare clockSd: number
  declare scale: CreationOptional<number>
  declare offset: CreationOptional<number>
  declare pressureKind: CreationOptional<'gauge' | 'absolute'>
  /** As it was surveyed; null: by east and north. */
  declare surveyed: CreationOptional<SensorPosition | null>
}

export const defineDeploymentSensor = (sequelize: Sequelize): void => {
  DeploymentSensor.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      deploymentId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      sensorId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      position: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      letter: { type: DataTypes.STRING(16), allowNull: false },
      east: { type: DataTypes.DOUBLE, allowNull: false },
      north: { type: DataTypes.DOUBLE, allowNull: false },
      heightAboveBed: { type: DataTypes.DOUBLE, allowNull: false },
      positionSd: { type: DataTypes.DOUBLE, allowNull: false },
      clockSd: { type: DataTypes.DOUBLE, allowNull: false },
      scale: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 1 },
      offset: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0 },
      pressureKind: { type: DataTypes.ENUM('gauge', 'absolute'), allowNull: false, defaultValue: 'gauge' },
      surveyed: DataTypes.JSON,
    },
    { sequelize, tableName: 'deploymentSensors' },
  )
}
