import type { Includeable } from 'sequelize';
import { NotFoundError } from '../errors.js';
import { Membership } from '../models/membership.js';
import { Team } from '../models/team.js';
import { User } from '../models/user.js';

const withTeams: Includeable = { model: Membership, as: 'memberships', include: [{ model: Team, as: 'team' }] };

/** Everybody with an account, by name, with their teams. */
export async function findUsers(): Promise<User[]> {
  return await User.findAll({
    include: [withTeams],
    order: [
      ['name', 'ASC'],
      ['email', 'ASC'],
    ],
  });
}

/** @throws NotFoundError */
export async function findUserWithTeams(userId: string): Promise<User> {
  const user = await User.findByPk(userId, { include: [withTeams] });
  if (user === null) throw new NotFoundError();
  return user;
}
