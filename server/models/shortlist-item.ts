import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import type { Verdict } from '../../shared/types/states.js';
import { idAttribute, optionalReferenceAttribute, referenceAttribute, timeAttribute } from './columns.js';
import type { User } from './user.js';

/** Figures of the candidate when it was kept; they outlive its run. */
export interface CandidateSnapshot {
  readonly runNumber: number;
  /** False: a limit had cut its search, better candidates may be missing. Absent in items from before it was noted. */
  readonly runComplete?: boolean;
  readonly rank: number;
  readonly probability: number;
  readonly carbonDeviation: number | null;
  readonly protonDeviation: number | null;
}

export class ShortlistItem extends Model<InferAttributes<ShortlistItem>, InferCreationAttributes<ShortlistItem>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare shortlistId: string;
  declare unknownId: string;
  /** Null once the run and its candidates are gone. */
  declare candidateId: string | null;
  declare runId: string | null;
  declare smiles: string;
  declare idcode: string;
  /** SHA-256 of `idcode`: a constitution is on the shortlist once. */
  declare idcodeHash: string;
  declare verdict: CreationOptional<Verdict>;
  declare note: string;
  declare snapshot: CandidateSnapshot;
  declare addedById: string;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
  declare addedBy?: NonAttribute<User>;
}

export function initShortlistItem(sequelize: Sequelize): void {
  ShortlistItem.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      shortlistId: referenceAttribute(),
      unknownId: referenceAttribute(),
      candidateId: optionalReferenceAttribute(),
      runId: optionalReferenceAttribute(),
      smiles: { type: DataTypes.STRING(600), allowNull: false },
      idcode: { type: DataTypes.STRING(600), allowNull: false },
      idcodeHash: { type: DataTypes.STRING(64), allowNull: false },
      verdict: { type: DataTypes.STRING(24), allowNull: false, defaultValue: 'open' },
      note: { type: DataTypes.TEXT, allowNull: false },
      snapshot: { type: DataTypes.JSON, allowNull: false },
      addedById: referenceAttribute(),
      createdAt: timeAttribute(),
      updatedAt: timeAttribute(),
    },
    { sequelize, tableName: 'shortlist_items', underscored: true },
  );
}
