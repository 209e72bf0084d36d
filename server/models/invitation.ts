import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import type { TeamRole } from '../../shared/types/roles.js';
import { idAttribute, optionalTimeAttribute, referenceAttribute, timeAttribute } from './columns.js';
import type { Team } from './team.js';
import type { User } from './user.js';

export class Invitation extends Model<InferAttributes<Invitation>, InferCreationAttributes<Invitation>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare email: string;
  declare role: TeamRole;
  declare tokenHash: string;
  declare invitedById: string;
  declare createdAt: CreationOptional<Date>;
  declare expiresAt: Date;
  declare acceptedAt: CreationOptional<Date | null>;
  declare revokedAt: CreationOptional<Date | null>;
  declare team?: NonAttribute<Team>;
  declare invitedBy?: NonAttribute<User>;

  isOpen(now: Date): boolean {
    return this.acceptedAt === null && this.revokedAt === null && this.expiresAt > now;
  }
}

export function initInvitation(sequelize: Sequelize): void {
  Invitation.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      email: { type: DataTypes.STRING(254), allowNull: false },
      role: { type: DataTypes.STRING(24), allowNull: false },
      tokenHash: { type: DataTypes.STRING(64), allowNull: false },
      invitedById: referenceAttribute(),
      createdAt: timeAttribute(),
      expiresAt: timeAttribute(),
      acceptedAt: optionalTimeAttribute(),
      revokedAt: optionalTimeAttribute(),
    },
    { sequelize, tableName: 'invitations', underscored: true, updatedAt: false },
  );
}
