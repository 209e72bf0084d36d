import { DataTypes, Model } from 'sequelize';
import type { InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize';
import { optionalTimeAttribute, timeAttribute } from './columns.js';

/**
 * Wrong passwords given for an e-mail address since the last success. Kept by the hash of the address and whether or
 * not there is such an account, so that a lock-out does not tell which addresses are known.
 */
export class SignInAttempt extends Model<InferAttributes<SignInAttempt>, InferCreationAttributes<SignInAttempt>> {
  declare emailHash: string;
  declare failures: number;
  declare lockedUntil: Date | null;
  declare updatedAt: Date;
}

export function initSignInAttempt(sequelize: Sequelize): void {
  SignInAttempt.init(
    {
      emailHash: { type: DataTypes.STRING(64), primaryKey: true },
      failures: { type: DataTypes.INTEGER, allowNull: false },
      lockedUntil: optionalTimeAttribute(),
      updatedAt: timeAttribute(),
    },
    { sequelize, tableName: 'sign_in_attempts', underscored: true, timestamps: false },
  );
}
