import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { DeploymentDraftContent } from '../../shared/schemas/stationSetUpDeployments.ts'

/** A survey that is worked on. Retired when it is thrown away or put in force as `deploymentId`. */
export class DeploymentDraft extends Model<InferAttributes<DeploymentDraft>, InferCreationAttributes<DeploymentDraft>> {
  declare id: CreationOptional<number>
  declare stationId: number
  declare basedOnId: number | null
  /** The version of the past that it corrects. */
  declare correctsId: number | null
  declare content: DeploymentDraftContent
  declare version: CreationOptional<number>
  declare authorId: number | null
  declare deploymentId: number | null
  declare createdAt: Date
  declare updatedAt: Date
  declare retiredAt: Date | null
  /** Set by the database: what the draft is open for, 0 for a new version; one of each a station. */
  declare readonly openFor: CreationOptional<number | null>
}

export const defineDeploymentDraft = (sequelize: Sequelize): void => {
  DeploymentDraft.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      stationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      basedOnId: DataTypes.INTEGER.UNSIGNED,
      correctsId: DataTypes.INTEGER.UNSIGNED,
      content: { type: DataTypes.JSON, allowNull: false },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      authorId: DataTypes.INTEGER.UNSIGNED,
      deploymentId: DataTypes.INTEGER.UNSIGNED,
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
      retiredAt: DataTypes.DATE(3),
      openFor: DataTypes.INTEGER.UNSIGNED,
    },
    { sequelize, tableName: 'deploymentDrafts' },
  )
}
