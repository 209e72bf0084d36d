import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize';
import type { ShardResult, ShardSpec } from '../../shared/jobs/contract.js';
import { idAttribute, optionalTimeAttribute, referenceAttribute } from './columns.js';

export type ShardStatus = 'waiting' | 'running' | 'done';

/** A part of a run's search tree; its result stays until the run is merged, so that no finished work is lost. */
export class RunShard extends Model<InferAttributes<RunShard>, InferCreationAttributes<RunShard>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare runId: string;
  declare index: number;
  declare spec: ShardSpec;
  declare status: CreationOptional<ShardStatus>;
  /** How often the shard was started. */
  declare attempt: CreationOptional<number>;
  declare result: CreationOptional<ShardResult | null>;
  declare cpuSeconds: CreationOptional<number>;
  declare finishedAt: CreationOptional<Date | null>;
}

export function initRunShard(sequelize: Sequelize): void {
  RunShard.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      runId: referenceAttribute(),
      // INDEX is a reserved word of SQL.
      index: { type: DataTypes.INTEGER, allowNull: false, field: 'shard_index' },
      spec: { type: DataTypes.JSON, allowNull: false },
      status: { type: DataTypes.STRING(24), allowNull: false, defaultValue: 'waiting' },
      attempt: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
      result: { type: DataTypes.JSON, allowNull: true },
      cpuSeconds: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0 },
      finishedAt: optionalTimeAttribute(),
    },
    { sequelize, tableName: 'run_shards', underscored: true, timestamps: false },
  );
}
