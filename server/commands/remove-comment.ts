import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import type { Comment } from '../models/comment.js';
import { Unknown } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';

export async function removeComment(context: AppContext, actor: Actor, comment: Comment): Promise<void> {
  await context.sequelize.transaction(async (transaction) => {
    const unknown = await Unknown.findByPk(comment.unknownId, { transaction, rejectOnEmpty: true });
    await comment.destroy({ transaction });
    await recordAudit(transaction, actor, 'comment.remove', {
      kind: 'comment',
      id: comment.id,
      label: `on ${unknown.code}`,
      teamId: comment.teamId,
    });
  });
}
