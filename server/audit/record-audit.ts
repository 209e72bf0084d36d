import type { Transaction } from 'sequelize';
import { AuditEvent } from '../models/audit-event.js';
import type { Actor } from '../policies/actor.js';

/** What was changed. */
export interface AuditSubject {
  /** What it is: "unknown", "run". */
  readonly kind: string;
  readonly id: string;
  /** How people call it: its code, name or e-mail address. */
  readonly label: string;
  /** Absent: of the installation. */
  readonly teamId?: string;
}

/** Who changed it; null = the installation itself, e.g. at set-up. */
export type AuditActor = Pick<Actor, 'userId' | 'name'> | null;

/**
 * Writes down a change in the transaction that makes it. `action` reads like a rule of the policies: "unknown.update".
 * `detail` must hold no passwords, links or tokens.
 */
export async function recordAudit(
  transaction: Transaction,
  actor: AuditActor,
  action: string,
  subject: AuditSubject,
  detail: Readonly<Record<string, unknown>> = {},
): Promise<void> {
  await AuditEvent.create(
    {
      at: new Date(),
      actorId: actor?.userId ?? null,
      actorName: actor?.name ?? 'Installation',
      action,
      subject: `${subject.kind} ${subject.label}`.slice(0, 300),
      subjectId: subject.id,
      teamId: subject.teamId ?? null,
      detail,
    },
    { transaction },
  );
}
