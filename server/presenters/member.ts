import type { z } from 'zod';
import type { memberResponse } from '../../shared/schemas/people.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';
import type { Member } from '../queries/members.js';

export function presentMember(actor: Actor, { membership, user, isLastLead }: Member): z.input<typeof memberResponse> {
  return {
    userId: user.id,
    name: user.name,
    email: user.email,
    role: membership.role,
    joinedAt: membership.createdAt.toISOString(),
    abilities: abilitiesOn(actor, 'member', ['changeRole', 'remove', 'setQuota'], {
      teamId: membership.teamId,
      userId: user.id,
      isLastLead,
    }),
  };
}
