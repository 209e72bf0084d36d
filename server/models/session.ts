import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import { idAttribute, optionalTimeAttribute, referenceAttribute, timeAttribute } from './columns.js';
import type { User } from './user.js';

export type SessionEndReason = 'signedOut' | 'ended' | 'replayed' | 'passwordReset' | 'disabled';

/** A sign-in on one browser: the family of refresh tokens that follow each other. */
export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  declare id: CreationOptional<string>;
  declare userId: string;
  /** Hash of the only refresh token that is still good. */
  declare refreshTokenHash: string;
  declare userAgent: string;
  declare createdAt: CreationOptional<Date>;
  declare lastUsedAt: Date;
  declare expiresAt: Date;
  declare endedAt: CreationOptional<Date | null>;
  declare endReason: CreationOptional<SessionEndReason | null>;
  declare user?: NonAttribute<User>;

  isOpen(now: Date): boolean {
    return this.endedAt === null && this.expiresAt > now;
  }
}

export function initSession(sequelize: Sequelize): void {
  Session.init(
    {
      id: idAttribute(),
      userId: referenceAttribute(),
      refreshTokenHash: { type: DataTypes.STRING(64), allowNull: false },
      userAgent: { type: DataTypes.STRING(300), allowNull: false },
      createdAt: timeAttribute(),
      lastUsedAt: timeAttribute(),
      expiresAt: timeAttribute(),
      endedAt: optionalTimeAttribute(),
      endReason: { type: DataTypes.STRING(24), allowNull: true },
    },
    { sequelize, tableName: 'sessions', underscored: true, updatedAt: false },
  );
}
