import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, NonAttribute, Sequelize } from 'sequelize';
import { idAttribute, referenceAttribute, timeAttribute } from './columns.js';
import type { User } from './user.js';

export class Comment extends Model<InferAttributes<Comment>, InferCreationAttributes<Comment>> {
  declare id: CreationOptional<string>;
  declare teamId: string;
  declare unknownId: string;
  declare authorId: string;
  declare text: string;
  declare createdAt: CreationOptional<Date>;
  declare author?: NonAttribute<User>;
}

export function initComment(sequelize: Sequelize): void {
  Comment.init(
    {
      id: idAttribute(),
      teamId: referenceAttribute(),
      unknownId: referenceAttribute(),
      authorId: referenceAttribute(),
      text: { type: DataTypes.TEXT, allowNull: false },
      createdAt: timeAttribute(),
    },
    { sequelize, tableName: 'comments', underscored: true, updatedAt: false },
  );
}
