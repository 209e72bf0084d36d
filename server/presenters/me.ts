import type { z } from 'zod';
import type { meResponse } from '../../shared/schemas/people.js';
import type { Membership } from '../models/membership.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';
import { INSTALLATION } from '../policies/policies.js';

/** The signed-in person. `memberships` come with their team. */
export function presentMe(actor: Actor, memberships: readonly Membership[]): z.input<typeof meResponse> {
  return {
    user: { id: actor.userId, name: actor.name, email: actor.email, isAdmin: actor.isAdmin },
    memberships: memberships.flatMap(({ teamId, role, team }) =>
      team === undefined
        ? []
        : [
            {
              teamId,
              teamName: team.name,
              role,
              isDemo: team.isDemo,
              abilities: abilitiesOn(
                actor,
                'team',
                ['readUnknowns', 'createUnknown', 'createFragment', 'manageMembers', 'readUsage', 'setQuotas'],
                team,
              ),
            },
          ],
    ),
    abilities: abilitiesOn(actor, 'installation', ['createTeam', 'manageUsers', 'readAudit'], INSTALLATION),
  };
}
