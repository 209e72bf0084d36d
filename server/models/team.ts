import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize';
import { idAttribute, timeAttribute } from './columns.js';

export class Team extends Model<InferAttributes<Team>, InferCreationAttributes<Team>> {
  declare id: CreationOptional<string>;
  declare name: string;
  /** Invented data, marked as such wherever it is shown. */
  declare isDemo: CreationOptional<boolean>;
  /** Highest number given to an unknown of this team; read and raised with the row locked. */
  declare lastUnknownNumber: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

export function initTeam(sequelize: Sequelize): void {
  Team.init(
    {
      id: idAttribute(),
      name: { type: DataTypes.STRING(120), allowNull: false },
      isDemo: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      lastUnknownNumber: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
      createdAt: timeAttribute(),
      updatedAt: timeAttribute(),
    },
    { sequelize, tableName: 'teams', underscored: true },
  );
}
