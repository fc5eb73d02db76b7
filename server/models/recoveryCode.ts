import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** Stands in once for a code of the second factor. Only the hash is kept. */
export class RecoveryCode extends Model<InferAttributes<RecoveryCode>, InferCreationAttributes<RecoveryCode>> {
  declare id: CreationOptional<number>
  declare personId: number
  declare codeHash: Buffer
  declare createdAt: Date
  declare usedAt: Date | null
}

export const defineRecoveryCode = (sequelize: Sequelize): void => {
  RecoveryCode.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      codeHash: { type: DataTypes.STRING(32, true), allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      usedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'recoveryCodes' },
  )
}
