import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A labelled recomputation; run 0 is the operational one and needs no row to refer to. */
export class Run extends Model<InferAttributes<Run>, InferCreationAttributes<Run>> {
  declare id: CreationOptional<number>
  declare label: string
  declare stationId: number | null
  declare startsAt: Date | null
  declare endsAt: Date | null
  declare settings: Record<string, unknown> | null
  declare deploymentId: number | null
  declare personId: number | null
  declare status: 'operational' | 'queued' | 'running' | 'done' | 'failed' | 'cancelled'
  declare createdAt: Date
}

export const defineRun = (sequelize: Sequelize): void => {
  Run.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      label: { type: DataTypes.STRING(120), allowNull: false },
      stationId: DataTypes.INTEGER.UNSIGNED,
      startsAt: DataTypes.DATE(3),
      endsAt: DataTypes.DATE(3),
      settings: DataTypes.JSON,
      deploymentId: DataTypes.INTEGER.UNSIGNED,
      personId: DataTypes.INTEGER.UNSIGNED,
      status: {
        type: DataTypes.ENUM('operational', 'queued', 'running', 'done', 'failed', 'cancelled'),
        allowNull: false,
      },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'runs' },
  )
}
