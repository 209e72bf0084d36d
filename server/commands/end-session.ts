import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import type { Session } from '../models/session.js';
import type { Actor } from '../policies/actor.js';

/** Ends one session of the actor from the list; one that has ended already stays as it is. */
export async function endSession({ sequelize }: AppContext, actor: Actor, session: Session): Promise<void> {
  await sequelize.transaction(async (transaction) => {
    await session.reload({ transaction, lock: transaction.LOCK.UPDATE });
    if (session.endedAt !== null) return;
    await session.update({ endedAt: new Date(), endReason: 'ended' }, { transaction });
    await recordAudit(transaction, actor, 'session.end', { kind: 'user', id: actor.userId, label: actor.email });
  });
}
