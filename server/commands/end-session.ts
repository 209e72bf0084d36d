import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import type { Session, SessionEndReason } from '../models/session.js';
import type { Actor } from '../policies/actor.js';

/** Ends one session of the actor; one that has ended already stays as it is. */
export async function endSession(context: AppContext, actor: Actor, session: Session, reason: SessionEndReason): Promise<void> {
  await context.sequelize.transaction(async (transaction) => {
    await session.reload({ transaction, lock: transaction.LOCK.UPDATE });
    if (session.endedAt !== null) return;
    await session.update({ endedAt: new Date(), endReason: reason }, { transaction });
    await recordAudit(transaction, actor, 'session.end', { kind: 'user', id: actor.userId, label: actor.email }, { reason });
  });
}
