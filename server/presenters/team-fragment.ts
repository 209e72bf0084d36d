import type { z } from 'zod';
import type { teamFragmentRow } from '../../shared/schemas/unknowns.js';
import type { TeamFragment } from '../models/team-fragment.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';
import { presentPerson } from './person.js';

export function presentTeamFragment(actor: Actor, fragment: TeamFragment): z.input<typeof teamFragmentRow> {
  return {
    id: fragment.id,
    name: fragment.name,
    group: fragment.group,
    smiles: fragment.smiles,
    createdBy: presentPerson(fragment.createdBy),
    createdAt: fragment.createdAt.toISOString(),
    abilities: abilitiesOn(actor, 'fragment', ['remove'], fragment),
  };
}
