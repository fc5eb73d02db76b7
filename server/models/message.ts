import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { BulletinContent } from '../../shared/schemas/bulletin.ts'
import type { MessageContent, MessageKind } from '../../shared/schemas/message.ts'

/** An e-mail as it was written, once for all who get it: frozen in the transaction of what it tells. */
export class Message extends Model<InferAttributes<Message>, InferCreationAttributes<Message>> {
  declare id: CreationOptional<number>
  declare kind: MessageKind
  declare alertId: number | null
  declare bulletinId: number | null
  declare rootMessageId: number | null
  declare step: number | null
  declare subject: string
  declare text: string
  declare html: string | null
  declare content: MessageContent | null
  declare bulletin: BulletinContent | null
  declare isExercise: boolean
  declare createdAt: Date
  /** When its recipients were worked out; null: still to do. */
  declare queuedAt: Date | null
}

export const defineMessage = (sequelize: Sequelize): void => {
  Message.init(
    {
      id: { type: DataTypes.BIGINT.UNSIGNED, autoIncrement: true, primaryKey: true },
      kind: { type: DataTypes.STRING(20), allowNull: false },
      alertId: DataTypes.BIGINT.UNSIGNED,
      bulletinId: DataTypes.INTEGER.UNSIGNED,
      rootMessageId: DataTypes.BIGINT.UNSIGNED,
      step: DataTypes.INTEGER.UNSIGNED,
      subject: { type: DataTypes.STRING(200), allowNull: false },
      text: { type: DataTypes.TEXT('medium'), allowNull: false },
      html: DataTypes.TEXT('medium'),
      content: DataTypes.JSON,
      bulletin: DataTypes.JSON,
      isExercise: { type: DataTypes.BOOLEAN, allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      queuedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'messages' },
  )
}
