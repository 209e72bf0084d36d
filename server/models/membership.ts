import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import type { TeamRole } from '../../shared/types/roles.js';
import { idAttribute, referenceAttribute, timeAttribute } from './columns.js';
import type { Team } from './team.js';
import type { User } from './user.js';

export class Membership extends Model<InferAttributes<Membership>, InferCreationAttributes<Membership>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare userId: string;
  declare role: TeamRole;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
  declare team?: NonAttribute<Team>;
  declare user?: NonAttribute<User>;
}

export function initMembership(sequelize: Sequelize): void {
  Membership.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      userId: referenceAttribute(),
      role: { type: DataTypes.STRING(24), allowNull: false },
      createdAt: timeAttribute(),
      updatedAt: timeAttribute(),
    },
    { sequelize, tableName: 'memberships', underscored: true },
  );
}
