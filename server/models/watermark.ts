import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** How far a job has come with a subject. `epoch` rises with every start of the job, so that a delayed writer of an older start is found out. */
export class Watermark extends Model<InferAttributes<Watermark>, InferCreationAttributes<Watermark>> {
  declare job: string
  declare subjectKind: string
  declare subjectId: number
  declare doneUpTo: Date | null
  declare epoch: CreationOptional<number>
  declare updatedAt: Date
}

export const defineWatermark = (sequelize: Sequelize): void => {
  Watermark.init(
    {
      job: { type: DataTypes.STRING(40), primaryKey: true },
      subjectKind: { type: DataTypes.STRING(20), primaryKey: true },
      subjectId: { type: DataTypes.BIGINT.UNSIGNED, primaryKey: true },
      doneUpTo: DataTypes.DATE(3),
      epoch: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false, defaultValue: 0 },
      updatedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'watermarks' },
  )
}
