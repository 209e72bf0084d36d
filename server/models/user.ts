import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import { idAttribute, timeAttribute } from './columns.js';
import type { Membership } from './membership.js';

/** A person with an account. `email` is kept in lower case. */
export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
  declare id: CreationOptional<string>;
  declare email: string;
  declare name: string;
  declare passwordHash: string;
  declare isAdmin: CreationOptional<boolean>;
  declare isDisabled: CreationOptional<boolean>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
  declare memberships?: NonAttribute<Membership[]>;
}

export function initUser(sequelize: Sequelize): void {
  User.init(
    {
      id: idAttribute(),
      email: { type: DataTypes.STRING(254), allowNull: false },
      name: { type: DataTypes.STRING(120), allowNull: false },
      passwordHash: { type: DataTypes.STRING(100), allowNull: false },
      isAdmin: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      isDisabled: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      createdAt: timeAttribute(),
      updatedAt: timeAttribute(),
    },
    { sequelize, tableName: 'users', underscored: true },
  );
}
