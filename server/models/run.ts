import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import type { BranchCut, Funnel, RunSettings } from '../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { RunStatus } from '../../shared/types/states.js';
import { idAttribute, optionalTimeAttribute, referenceAttribute, timeAttribute } from './columns.js';
import type { EvidenceRevision } from './evidence-revision.js';
import type { Unknown } from './unknown.js';
import type { User } from './user.js';

/** One enumeration and ranking over one evidence revision with fixed settings. */
export class Run extends Model<InferAttributes<Run>, InferCreationAttributes<Run>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare unknownId: string;
  /** Counts from 1 within the unknown. */
  declare number: number;
  declare status: CreationOptional<RunStatus>;
  /** Every constitution was looked at. */
  declare complete: CreationOptional<boolean>;
  declare revisionId: string;
  declare settings: Omit<RunSettings, 'mode'>;
  /** Frozen copy of the revision, with the settings written into its options. */
  declare evidence: EvidenceDocument;
  declare startedById: string;
  declare createdAt: CreationOptional<Date>;
  declare startedAt: CreationOptional<Date | null>;
  declare finishedAt: CreationOptional<Date | null>;
  declare cancelRequestedAt: CreationOptional<Date | null>;
  declare shardCount: CreationOptional<number>;
  /** The three counts are exact up to 2^53; the database keeps them as BIGINT. */
  declare constitutionCount: CreationOptional<number | null>;
  declare multigraphCount: CreationOptional<number | null>;
  declare survivorCount: CreationOptional<number | null>;
  declare keptCount: CreationOptional<number>;
  declare cpuSeconds: CreationOptional<number>;
  declare logSumExp: CreationOptional<number | null>;
  declare noneOfTheseProbability: CreationOptional<number | null>;
  declare funnel: CreationOptional<Funnel | null>;
  /** Null for runs from before branches were counted. */
  declare cuts: CreationOptional<readonly BranchCut[] | null>;
  declare failure: CreationOptional<{ code: string; message: string } | null>;
  declare unknown?: NonAttribute<Unknown>;
  declare revision?: NonAttribute<EvidenceRevision>;
  declare startedBy?: NonAttribute<User>;
}

export function initRun(sequelize: Sequelize): void {
  Run.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      unknownId: referenceAttribute(),
      number: { type: DataTypes.INTEGER, allowNull: false },
      status: { type: DataTypes.STRING(24), allowNull: false, defaultValue: 'queued' },
      complete: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      revisionId: referenceAttribute(),
      settings: { type: DataTypes.JSON, allowNull: false },
      evidence: { type: DataTypes.JSON, allowNull: false },
      startedById: referenceAttribute(),
      createdAt: timeAttribute(),
      startedAt: optionalTimeAttribute(),
      finishedAt: optionalTimeAttribute(),
      cancelRequestedAt: optionalTimeAttribute(),
      shardCount: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
      constitutionCount: { type: DataTypes.BIGINT, allowNull: true },
      multigraphCount: { type: DataTypes.BIGINT, allowNull: true },
      survivorCount: { type: DataTypes.BIGINT, allowNull: true },
      keptCount: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
      cpuSeconds: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0 },
      logSumExp: { type: DataTypes.DOUBLE, allowNull: true },
      noneOfTheseProbability: { type: DataTypes.DOUBLE, allowNull: true },
      funnel: { type: DataTypes.JSON, allowNull: true },
      cuts: { type: DataTypes.JSON, allowNull: true },
      failure: { type: DataTypes.JSON, allowNull: true },
    },
    { sequelize, tableName: 'runs', underscored: true, updatedAt: false },
  );
}
