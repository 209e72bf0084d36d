import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize';
import { idAttribute, referenceAttribute, timeAttribute } from './columns.js';

/** CPU seconds of one run: reserved when it starts, settled to what was used when it ends. */
export class UsageEntry extends Model<InferAttributes<UsageEntry>, InferCreationAttributes<UsageEntry>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare userId: string;
  declare runId: string;
  /** UTC month in which the run was started, `2031-07`. */
  declare month: string;
  declare kind: 'reserved' | 'settled';
  declare cpuSeconds: number;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

export function initUsageEntry(sequelize: Sequelize): void {
  UsageEntry.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      userId: referenceAttribute(),
      runId: referenceAttribute(),
      month: { type: DataTypes.STRING(7), allowNull: false },
      kind: { type: DataTypes.STRING(24), allowNull: false },
      cpuSeconds: { type: DataTypes.DOUBLE, allowNull: false },
      createdAt: timeAttribute(),
      updatedAt: timeAttribute(),
    },
    { sequelize, tableName: 'usage_entries', underscored: true },
  );
}
