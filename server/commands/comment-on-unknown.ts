import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { Comment } from '../models/comment.js';
import type { Unknown } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';

export async function commentOnUnknown(context: AppContext, actor: Actor, unknown: Unknown, text: string): Promise<Comment> {
  return await context.sequelize.transaction(async (transaction) => {
    const comment = await Comment.create({ teamId: unknown.teamId, unknownId: unknown.id, authorId: actor.userId, text }, { transaction });
    await recordAudit(transaction, actor, 'unknown.comment', {
      kind: 'unknown',
      id: unknown.id,
      label: unknown.code,
      teamId: unknown.teamId,
    });
    return comment;
  });
}
