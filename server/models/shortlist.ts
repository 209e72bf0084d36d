import { Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize';
import { idAttribute, referenceAttribute, timeAttribute } from './columns.js';

/** The candidates of one unknown that people keep; made with its first item. */
export class Shortlist extends Model<InferAttributes<Shortlist>, InferCreationAttributes<Shortlist>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare unknownId: string;
  declare createdAt: CreationOptional<Date>;
}

export function initShortlist(sequelize: Sequelize): void {
  Shortlist.init(
    { id: idAttribute(), teamId: referenceAttribute(), unknownId: referenceAttribute(), createdAt: timeAttribute() },
    { sequelize, tableName: 'shortlists', underscored: true, updatedAt: false },
  );
}
