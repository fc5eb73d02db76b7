import { DataTypes, Model } from 'sequelize'
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize'
import type { DeliveryState } from '../../shared/schemas/message.ts'

/** One e-mail to one person. `accepted` is the mail server's word, `receivedAt` the person's. */
export class Delivery extends Model<InferAttributes<Delivery>, InferCreationAttributes<Delivery>> {
  declare id: CreationOptional<number>
  declare messageId: number
  declare personId: number
  declare address: string
  declare messageIdHeader: string
  declare state: CreationOptional<DeliveryState>
  declare attempts: CreationOptional<number>
  declare nextAttemptAt: Date | null
  declare leaseUntil: Date | null
  declare smtpReply: string | null
  declare acceptedAt: Date | null
  declare receivedAt: Date | null
  declare createdAt: Date
  /** The e-mail that brings its news, where it was merged in a flood. */
  declare rootMessageId: number | null
  /** Given to the mail server at the newest try: without an answer, nobody knows whether it arrived. */
  declare handedOverAt: Date | null
  /** How often that happened. */
  declare unknownCount: CreationOptional<number>
  /** Names of those who are away and whose deputy this person is. */
  declare standsInFor: string | null
}

export const defineDelivery = (sequelize: Sequelize): void => {
  Delivery.init(
    {
      id: { type: DataTypes.BIGINT.UNSIGNED, autoIncrement: true, primaryKey: true },
      messageId: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      address: { type: DataTypes.STRING(254), allowNull: false },
      messageIdHeader: { type: DataTypes.STRING(160), allowNull: false },
      state: {
        type: DataTypes.ENUM('queued', 'leased', 'accepted', 'refused', 'unknown', 'givenUp', 'merged'),
        allowNull: false,
        defaultValue: 'queued',
      },
      attempts: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      nextAttemptAt: DataTypes.DATE(3),
      leaseUntil: DataTypes.DATE(3),
      smtpReply: DataTypes.STRING(500),
      acceptedAt: DataTypes.DATE(3),
      receivedAt: DataTypes.DATE(3),
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      rootMessageId: DataTypes.BIGINT.UNSIGNED,
      handedOverAt: DataTypes.DATE(3),
      unknownCount: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      standsInFor: DataTypes.STRING(300),
    },
    { sequelize, tableName: 'deliveries' },
  )
}
