import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize';
import { idAttribute, optionalTimeAttribute, referenceAttribute, timeAttribute } from './columns.js';

export class PasswordReset extends Model<InferAttributes<PasswordReset>, InferCreationAttributes<PasswordReset>> {
  declare id: CreationOptional<string>;
  declare userId: string;
  declare tokenHash: string;
  declare createdAt: CreationOptional<Date>;
  declare expiresAt: Date;
  declare usedAt: CreationOptional<Date | null>;

  isOpen(now: Date): boolean {
    return this.usedAt === null && this.expiresAt > now;
  }
}

export function initPasswordReset(sequelize: Sequelize): void {
  PasswordReset.init(
    {
      id: idAttribute(),
      userId: referenceAttribute(),
      tokenHash: { type: DataTypes.STRING(64), allowNull: false },
      createdAt: timeAttribute(),
      expiresAt: timeAttribute(),
      usedAt: optionalTimeAttribute(),
    },
    { sequelize, tableName: 'password_resets', underscored: true, updatedAt: false },
  );
}
