import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { ConflictError } from '../errors.js';
import type { Invitation } from '../models/invitation.js';
import type { Actor } from '../policies/actor.js';

/** @throws ConflictError invitationClosed when it was accepted, withdrawn or has run out */
export async function revokeInvitation({ sequelize }: AppContext, actor: Actor, invitation: Invitation): Promise<void> {
  await sequelize.transaction(async (transaction) => {
    await invitation.reload({ transaction, lock: transaction.LOCK.UPDATE });
    if (!invitation.isOpen(new Date())) throw new ConflictError('invitationClosed', 'This invitation is not open any more.');
    await invitation.update({ revokedAt: new Date() }, { transaction });
    await recordAudit(transaction, actor, 'invitation.revoke', {
      kind: 'invitation',
      id: invitation.id,
      label: invitation.email,
      teamId: invitation.teamId,
    });
  });
}
