import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { ObservationKind } from '../../shared/schemas/placeLocalFit.ts'

/** What somebody saw at a place. Yes is 1, no is 0; heights are metres. */
export class Observation extends Model<InferAttributes<Observation>, InferCreationAttributes<Observation>> {
  declare id: CreationOptional<number>
  declare placeId: number
  declare at: Date
  declare kind: ObservationKind
  declare value: number
  declare note: string
  declare personId: number | null
  declare createdAt: Date
  declare withdrawnAt: CreationOptional<Date | null>
  declare withdrawnById: CreationOptional<number | null>
  declare withdrawReason: CreationOptional<string | null>
}

export const defineObservation = (sequelize: Sequelize): void => {
  Observation.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      placeId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      at: { type: DataTypes.DATE(3), allowNull: false },
      kind: { type: DataTypes.STRING(24), allowNull: false },
      value: { type: DataTypes.DOUBLE, allowNull: false },
      note: { type: DataTypes.STRING(500), allowNull: false },
      personId: DataTypes.INTEGER.UNSIGNED,
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      withdrawnAt: DataTypes.DATE(3),
      withdrawnById: DataTypes.INTEGER.UNSIGNED,
      withdrawReason: DataTypes.STRING(500),
    },
    { sequelize, tableName: 'observations' },
  )
}
