import type { z } from 'zod';
import type { teamResponse } from '../../shared/schemas/people.js';
import type { Team } from '../models/team.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';

export function presentTeam(actor: Actor, team: Team): z.input<typeof teamResponse> {
  return {
    id: team.id,
    name: team.name,
    isDemo: team.isDemo,
    createdAt: team.createdAt.toISOString(),
    abilities: abilitiesOn(actor, 'team', ['update', 'manageMembers', 'readUsage', 'setQuotas'], team),
  };
}
