import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { Priority, TimeSpan } from '../../shared/schemas/limit.ts'

/** A person on a list, with the hours (null: all) and priorities for which they are told. */
export class ListMember extends Model<InferAttributes<ListMember>, InferCreationAttributes<ListMember>> {
  declare listId: number
  declare personId: number
  declare position: number
  declare hours: TimeSpan['hours']
  declare priorities: Priority[]
}

export const defineListMember = (sequelize: Sequelize): void => {
  ListMember.init(
    {
      listId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      personId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      position: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      hours: DataTypes.JSON,
      priorities: { type: DataTypes.JSON, allowNull: false },
    },
    { sequelize, tableName: 'listMembers' },
  )
}
