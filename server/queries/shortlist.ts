import { ShortlistItem } from '../models/shortlist-item.js';
import { User } from '../models/user.js';
import { type Actor, teamIdsOf } from '../policies/actor.js';

const addedBy = { model: User, as: 'addedBy', attributes: ['id', 'name'], required: true };

/** What people keep of an unknown, in the order in which it was added. */
export async function listShortlist(unknownId: string): Promise<ShortlistItem[]> {
  return await ShortlistItem.findAll({
    where: { unknownId },
    include: [addedBy],
    order: [
      ['createdAt', 'ASC'],
      ['id', 'ASC'],
    ],
  });
}

/** A shortlist item of one of the actor's teams. */
export async function findShortlistItem(actor: Actor, itemId: string): Promise<ShortlistItem | null> {
  return await ShortlistItem.findOne({ where: { id: itemId, teamId: teamIdsOf(actor) }, include: [addedBy] });
}
