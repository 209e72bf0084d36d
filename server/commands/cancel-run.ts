import { ENDED_RUN_STATUSES } from '../../shared/types/states.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { Run } from '../models/run.js';
import type { Actor } from '../policies/actor.js';

/** Cancels a run and waits until it has stopped. A run that has ended stays as it is. */
export async function cancelRun(context: AppContext, actor: Actor, run: Run): Promise<void> {
  const isOpen = await context.sequelize.transaction(async (transaction) => {
    const current = await Run.findByPk(run.id, {
      attributes: ['id', 'status', 'cancelRequestedAt'],
      transaction,
      lock: transaction.LOCK.UPDATE,
      rejectOnEmpty: true,
    });
    if (ENDED_RUN_STATUSES.includes(current.status)) return false;
    if (current.cancelRequestedAt !== null) return true;
    await current.update({ cancelRequestedAt: new Date() }, { transaction });
    await recordAudit(transaction, actor, 'run.cancel', {
      kind: 'run',
      id: run.id,
      label: `${run.number} of ${run.unknown?.code ?? 'an unknown'}`,
      teamId: run.teamId,
    });
    return true;
  });
  if (isOpen) await context.queue?.cancel(run.id);
}
