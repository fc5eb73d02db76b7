import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A person is away: their deputy is told instead. */
export class Absence extends Model<InferAttributes<Absence>, InferCreationAttributes<Absence>> {
  declare id: CreationOptional<number>
  declare personId: number
  declare startsAt: Date
  declare endsAt: Date
}

export const defineAbsence = (sequelize: Sequelize): void => {
  Absence.init(
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, autoIncrement: true, primaryKey: true },
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      startsAt: { type: DataTypes.DATE(3), allowNull: false },
      endsAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'absences' },
  )
}
