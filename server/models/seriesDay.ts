import { DataTypes, Model } from 'sequelize'
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'

/** A day of one quantity of one subject: deflated Float32 values and flags. Derived from run 0 and rebuilt by a command. */
export class SeriesDay extends Model<InferAttributes<SeriesDay>, InferCreationAttributes<SeriesDay>> {
  declare subjectKind: string
  declare subjectId: number
  declare quantity: string
  declare day: string
  declare stepSeconds: number
  declare minimum: number | null
  declare maximum: number | null
  declare mean: number | null
  declare goodCount: number
  declare payload: Buffer
}

export const defineSeriesDay = (sequelize: Sequelize): void => {
  SeriesDay.init(
    {
      subjectKind: { type: DataTypes.STRING(20), primaryKey: true },
      subjectId: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true },
      quantity: { type: DataTypes.STRING(40), primaryKey: true },
      day: { type: DataTypes.DATEONLY, primaryKey: true },
      stepSeconds: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      minimum: DataTypes.DOUBLE,
      maximum: DataTypes.DOUBLE,
      mean: DataTypes.DOUBLE,
      goodCount: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      payload: { type: DataTypes.BLOB('medium'), allowNull: false },
    },
    { sequelize, tableName: 'seriesDays' },
  )
}
