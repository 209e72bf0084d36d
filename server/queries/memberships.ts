import { Membership } from '../models/membership.js';
import { Team } from '../models/team.js';

/** Memberships of a person with their teams, by name of the team. */
export async function findMembershipsOf(userId: string): Promise<Membership[]> {
  return await Membership.findAll({
    where: { userId },
    include: [{ model: Team, as: 'team', required: true }],
    order: [[{ model: Team, as: 'team' }, 'name', 'ASC']],
  });
}
