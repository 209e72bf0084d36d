import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import { idAttribute, referenceAttribute, timeAttribute } from './columns.js';
import type { Unknown } from './unknown.js';
import type { User } from './user.js';

/** All that was observed about an unknown at one time. Never changed once written. */
export class EvidenceRevision extends Model<InferAttributes<EvidenceRevision>, InferCreationAttributes<EvidenceRevision>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare unknownId: string;
  /** Counts from 1 within the unknown. */
  declare number: number;
  declare authorId: string;
  declare comment: string;
  declare formula: string;
  declare evidence: EvidenceDocument;
  /** What the reader of the evidence should know, e.g. that stereo was dropped. */
  declare notes: string[];
  declare createdAt: CreationOptional<Date>;
  declare unknown?: NonAttribute<Unknown>;
  declare author?: NonAttribute<User>;
}

export function initEvidenceRevision(sequelize: Sequelize): void {
  EvidenceRevision.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      unknownId: referenceAttribute(),
      number: { type: DataTypes.INTEGER, allowNull: false },
      authorId: referenceAttribute(),
      comment: { type: DataTypes.STRING(500), allowNull: false },
      formula: { type: DataTypes.STRING(120), allowNull: false },
      evidence: { type: DataTypes.JSON, allowNull: false },
      notes: { type: DataTypes.JSON, allowNull: false },
      createdAt: timeAttribute(),
    },
    { sequelize, tableName: 'evidence_revisions', underscored: true, updatedAt: false },
  );
}
