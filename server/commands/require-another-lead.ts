import { ConflictError } from '../errors.js';
import type { Actor } from '../policies/actor.js';
import { can } from '../policies/authorize.js';
import type { Member } from '../queries/members.js';

/**
 * For actors who run the team: the only thing that can still stand in the way is that nobody would lead it.
 * @throws ConflictError lastLead
 */
export function requireAnotherLead(actor: Actor, action: 'member.changeRole' | 'member.remove', { membership, isLastLead }: Member): void {
  if (can(actor, action, { teamId: membership.teamId, userId: membership.userId, isLastLead })) return;
  throw new ConflictError('lastLead', 'This is the last lead of the team. Make somebody else a lead first.');
}
