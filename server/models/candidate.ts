import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import type { CandidateRemark, PredictedSpectra, ScoreTerms, SignalMatch } from '../../shared/jobs/contract.js';
import { idAttribute, referenceAttribute } from './columns.js';
import type { Run } from './run.js';

/** A constitution that survived and was kept by its run. */
export class Candidate extends Model<InferAttributes<Candidate>, InferCreationAttributes<Candidate>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare runId: string;
  /** From 1, best first. */
  declare rank: number;
  declare smiles: string;
  declare idcode: string;
  /** SHA-256 of `idcode`; indexes on the text itself would be long. */
  declare idcodeHash: string;
  /** SHA-256 of the engine's canonical key. */
  declare keyHash: string;
  declare probability: number;
  declare score: number;
  declare terms: ScoreTerms;
  declare carbonDeviation: number | null;
  declare protonDeviation: number | null;
  declare spectra: PredictedSpectra;
  declare matches: readonly SignalMatch[];
  declare remarks: readonly CandidateRemark[];
  declare run?: NonAttribute<Run>;
}

export function initCandidate(sequelize: Sequelize): void {
  Candidate.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      runId: referenceAttribute(),
      rank: { type: DataTypes.INTEGER, allowNull: false },
      smiles: { type: DataTypes.STRING(600), allowNull: false },
      idcode: { type: DataTypes.STRING(600), allowNull: false },
      idcodeHash: { type: DataTypes.STRING(64), allowNull: false },
      keyHash: { type: DataTypes.STRING(64), allowNull: false },
      probability: { type: DataTypes.DOUBLE, allowNull: false },
      score: { type: DataTypes.DOUBLE, allowNull: false },
      terms: { type: DataTypes.JSON, allowNull: false },
      carbonDeviation: { type: DataTypes.DOUBLE, allowNull: true },
      protonDeviation: { type: DataTypes.DOUBLE, allowNull: true },
      spectra: { type: DataTypes.JSON, allowNull: false },
      matches: { type: DataTypes.JSON, allowNull: false },
      remarks: { type: DataTypes.JSON, allowNull: false },
    },
    { sequelize, tableName: 'candidates', underscored: true, timestamps: false },
  );
}
