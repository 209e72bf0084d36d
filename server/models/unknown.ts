import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import type { UnknownStatus } from '../../shared/types/states.js';
import { idAttribute, optionalReferenceAttribute, referenceAttribute, timeAttribute } from './columns.js';
import type { EvidenceRevision } from './evidence-revision.js';
import type { Team } from './team.js';
import type { User } from './user.js';

/** One sample to be identified. */
export class Unknown extends Model<InferAttributes<Unknown>, InferCreationAttributes<Unknown>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  /** Counts from 1 within the team. */
  declare number: number;
  /** `number` as people write it: U-0042. */
  declare code: string;
  declare title: string;
  declare description: string;
  declare purpose: 'research' | 'regulated';
  declare status: CreationOptional<UnknownStatus>;
  /** Formula of the current revision, so that lists can sort by it. */
  declare formula: CreationOptional<string | null>;
  declare currentRevisionId: CreationOptional<string | null>;
  declare createdById: string;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
  declare team?: NonAttribute<Team>;
  declare createdBy?: NonAttribute<User>;
  declare currentRevision?: NonAttribute<EvidenceRevision>;
}

/** U-0042; numbers above 9999 simply get longer. */
export const unknownCode = (number: number): string => `U-${String(number).padStart(4, '0')}`;

export function initUnknown(sequelize: Sequelize): void {
  Unknown.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      number: { type: DataTypes.INTEGER, allowNull: false },
      code: { type: DataTypes.STRING(16), allowNull: false },
      title: { type: DataTypes.STRING(160), allowNull: false },
      description: { type: DataTypes.TEXT, allowNull: false },
      purpose: { type: DataTypes.STRING(24), allowNull: false },
      status: { type: DataTypes.STRING(24), allowNull: false, defaultValue: 'new' },
      formula: { type: DataTypes.STRING(120), allowNull: true },
      currentRevisionId: optionalReferenceAttribute(),
      createdById: referenceAttribute(),
      createdAt: timeAttribute(),
      updatedAt: timeAttribute(),
    },
    { sequelize, tableName: 'unknowns', underscored: true },
  );
}
