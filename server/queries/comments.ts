import { Comment } from '../models/comment.js';
import { User } from '../models/user.js';
import { type Actor, teamIdsOf } from '../policies/actor.js';

const author = { model: User, as: 'author', attributes: ['id', 'name'], required: true };

/** Comments on an unknown, oldest first. */
export async function listComments(unknownId: string): Promise<Comment[]> {
  return await Comment.findAll({
    where: { unknownId },
    include: [author],
    order: [
      ['createdAt', 'ASC'],
      ['id', 'ASC'],
    ],
  });
}

/** A comment in one of the actor's teams. */
export async function findComment(actor: Actor, commentId: string): Promise<Comment | null> {
  return await Comment.findOne({ where: { id: commentId, teamId: teamIdsOf(actor) }, include: [author] });
}
