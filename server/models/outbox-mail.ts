import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize';
import { idAttribute, optionalTimeAttribute, timeAttribute } from './columns.js';

/** `failed` = given up after the last attempt; `expired` = what the mail offers is no longer good. */
export type MailStatus = 'waiting' | 'sent' | 'failed' | 'expired';

/** A mail to be sent, written in the transaction of the change it tells of. */
export class OutboxMail extends Model<InferAttributes<OutboxMail>, InferCreationAttributes<OutboxMail>> {
  declare id: CreationOptional<string>;
  declare recipient: string;
  declare subject: string;
  /** Emptied once the mail is sent or expired: it may hold a link that sets a password. */
  declare body: string;
  declare status: CreationOptional<MailStatus>;
  declare attempts: CreationOptional<number>;
  declare lastError: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare nextAttemptAt: Date;
  declare expiresAt: Date;
  declare sentAt: CreationOptional<Date | null>;
}

export function initOutboxMail(sequelize: Sequelize): void {
  OutboxMail.init(
    {
      id: idAttribute(),
      recipient: { type: DataTypes.STRING(254), allowNull: false },
      subject: { type: DataTypes.STRING(200), allowNull: false },
      body: { type: DataTypes.TEXT, allowNull: false },
      status: { type: DataTypes.STRING(24), allowNull: false, defaultValue: 'waiting' },
      attempts: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
      lastError: { type: DataTypes.STRING(500), allowNull: true },
      createdAt: timeAttribute(),
      nextAttemptAt: timeAttribute(),
      expiresAt: timeAttribute(),
      sentAt: optionalTimeAttribute(),
    },
    { sequelize, tableName: 'mail_outbox', underscored: true, updatedAt: false },
  );
}
