import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import { idAttribute, referenceAttribute, timeAttribute } from './columns.js';
import type { User } from './user.js';

/** A fragment of the team's own library. */
export class TeamFragment extends Model<InferAttributes<TeamFragment>, InferCreationAttributes<TeamFragment>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare name: string;
  declare group: string;
  declare smiles: string;
  /** SHA-256 of the canonical form, by which a fragment is in the library once. */
  declare canonicalHash: string;
  declare createdById: string;
  declare createdAt: CreationOptional<Date>;
  declare createdBy?: NonAttribute<User>;
}

export function initTeamFragment(sequelize: Sequelize): void {
  TeamFragment.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      name: { type: DataTypes.STRING(80), allowNull: false },
      // GROUP is a reserved word of SQL.
      group: { type: DataTypes.STRING(40), allowNull: false, field: 'group_name' },
      smiles: { type: DataTypes.STRING(300), allowNull: false },
      canonicalHash: { type: DataTypes.STRING(64), allowNull: false },
      createdById: referenceAttribute(),
      createdAt: timeAttribute(),
    },
    { sequelize, tableName: 'fragments', underscored: true, updatedAt: false },
  );
}
