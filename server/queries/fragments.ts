import { TeamFragment } from '../models/team-fragment.js';
import { User } from '../models/user.js';
import { type Actor, teamIdsOf } from '../policies/actor.js';

const createdBy = { model: User, as: 'createdBy', attributes: ['id', 'name'], required: true };

/** The library of a team, by group and name. */
export async function listFragments(teamId: string): Promise<TeamFragment[]> {
  return await TeamFragment.findAll({
    where: { teamId },
    include: [createdBy],
    order: [
      ['group', 'ASC'],
      ['name', 'ASC'],
      ['id', 'ASC'],
    ],
  });
}

/** A fragment of one of the actor's teams. */
export async function findFragment(actor: Actor, fragmentId: string): Promise<TeamFragment | null> {
  return await TeamFragment.findOne({ where: { id: fragmentId, teamId: teamIdsOf(actor) }, include: [createdBy] });
}
