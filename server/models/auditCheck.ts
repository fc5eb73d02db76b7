import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** What a look over the whole chain of the audit found. */
export class AuditCheck extends Model<InferAttributes<AuditCheck>, InferCreationAttributes<AuditCheck>> {
  declare id: CreationOptional<number>
  declare at: Date
  declare personId: number | null
  declare isWhole: boolean
  declare result: object
}

export const defineAuditCheck = (sequelize: Sequelize): void => {
  AuditCheck.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      at: { type: DataTypes.DATE(3), allowNull: false },
      personId: DataTypes.INTEGER.UNSIGNED,
      isWhole: { type: DataTypes.BOOLEAN, allowNull: false },
      result: { type: DataTypes.JSON, allowNull: false },
    },
    { sequelize, tableName: 'auditChecks' },
  )
}
