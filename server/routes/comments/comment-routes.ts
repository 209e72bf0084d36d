import type { AppContext } from '../../app-context.js';
import { commentOnUnknown } from '../../commands/comment-on-unknown.js';
import { removeComment } from '../../commands/remove-comment.js';
import { authorize } from '../../policies/authorize.js';
import { presentComment } from '../../presenters/comment.js';
import { findComment, listComments } from '../../queries/comments.js';
import { findUnknown } from '../../queries/unknowns.js';
import { route, type Route } from '../route.js';

export function commentRoutes(context: AppContext): Route[] {
  return [
    route('listComments', async ({ actor, params }) => {
      const unknown = authorize(actor, 'unknown.read', await findUnknown(actor, params.unknownId));
      const comments = await listComments(unknown.id);
      return { comments: comments.map((comment) => presentComment(actor, comment)) };
    }),
    route(
      'createComment',
      async ({ actor, params, body }) => {
        const unknown = authorize(actor, 'unknown.comment', await findUnknown(actor, params.unknownId));
        const { id } = await commentOnUnknown(context, actor, unknown, body.text);
        return presentComment(actor, authorize(actor, 'comment.read', await findComment(actor, id)));
      },
      { status: 201 },
    ),
    route('removeComment', async ({ actor, params }) => {
      await removeComment(context, actor, authorize(actor, 'comment.remove', await findComment(actor, params.commentId)));
    }),
  ];
}
