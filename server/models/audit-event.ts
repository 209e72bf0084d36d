import { DataTypes, Model } from 'sequelize';
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from 'sequelize';
import { idAttribute, optionalReferenceAttribute, timeAttribute } from './columns.js';

/** One change that somebody made. Rows are only ever added. */
export class AuditEvent extends Model<InferAttributes<AuditEvent>, InferCreationAttributes<AuditEvent>> {
  declare id: CreationOptional<string>;
  declare at: Date;
  /** Null: the installation itself, e.g. at set-up. */
  declare actorId: string | null;
  /** Name at that time. */
  declare actorName: string;
  declare action: string;
  /** What was changed, for people: "unknown U-0042". */
  declare subject: string;
  declare subjectId: string | null;
  declare teamId: string | null;
  declare detail: Record<string, unknown>;
}

export function initAuditEvent(sequelize: Sequelize): void {
  AuditEvent.init(
    {
      id: idAttribute(),
      at: timeAttribute(),
      actorId: optionalReferenceAttribute(),
      actorName: { type: DataTypes.STRING(120), allowNull: false },
      action: { type: DataTypes.STRING(60), allowNull: false },
      subject: { type: DataTypes.STRING(300), allowNull: false },
      subjectId: optionalReferenceAttribute(),
      teamId: optionalReferenceAttribute(),
      detail: { type: DataTypes.JSON, allowNull: false },
    },
    { sequelize, tableName: 'audit_events', underscored: true, timestamps: false },
  );
}
