import type { z } from 'zod';
import type { userRow } from '../../shared/schemas/people.js';
import type { User } from '../models/user.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';

/** `user` comes with memberships and their teams. */
export function presentUser(actor: Actor, user: User): z.input<typeof userRow> {
  return {
    id: user.id,
    name: user.name,
    email: user.email,
    isAdmin: user.isAdmin,
    isDisabled: user.isDisabled,
    createdAt: user.createdAt.toISOString(),
    teams: (user.memberships ?? []).flatMap(({ teamId, role, team }) =>
      team === undefined ? [] : [{ teamId, teamName: team.name, role }],
    ),
    abilities: abilitiesOn(actor, 'user', ['update', 'issueResetLink'], user),
  };
}
