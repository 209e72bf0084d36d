import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize';
import { idAttribute, referenceAttribute, timeAttribute } from './columns.js';

/** What one member may use beside the default of the role; null = the default holds. */
export class Quota extends Model<InferAttributes<Quota>, InferCreationAttributes<Quota>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare userId: string;
  declare cpuSecondsPerMonth: number | null;
  declare candidatesPerRun: number | null;
  declare runsAtOnce: number | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

export function initQuota(sequelize: Sequelize): void {
  Quota.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      userId: referenceAttribute(),
      cpuSecondsPerMonth: { type: DataTypes.INTEGER, allowNull: true },
      candidatesPerRun: { type: DataTypes.INTEGER, allowNull: true },
      runsAtOnce: { type: DataTypes.INTEGER, allowNull: true },
      createdAt: timeAttribute(),
      updatedAt: timeAttribute(),
    },
    { sequelize, tableName: 'quotas', underscored: true },
  );
}
