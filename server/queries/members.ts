import type { Transaction } from 'sequelize';
import { NotFoundError } from '../errors.js';
import { Membership } from '../models/membership.js';
import { User } from '../models/user.js';

export interface Member {
  readonly membership: Membership;
  readonly user: User;
  /** Without this person nobody who can sign in would lead the team. */
  readonly isLastLead: boolean;
}

/** Members of a team by name. */
export async function findMembers(teamId: string, transaction?: Transaction): Promise<Member[]> {
  const memberships = await Membership.findAll({
    where: { teamId },
    include: [{ model: User, as: 'user', required: true }],
    order: [[{ model: User, as: 'user' }, 'name', 'ASC']],
    ...(transaction === undefined ? {} : { transaction }),
  });
  const rows = memberships.flatMap((membership) => (membership.user === undefined ? [] : [{ membership, user: membership.user }]));
  const leads = rows.filter(({ membership, user }) => membership.role === 'lead' && !user.isDisabled);
  return rows.map((row) => ({ ...row, isLastLead: leads.length === 1 && leads[0] === row }));
}

/** @throws NotFoundError when the person is not a member */
export async function findMember(teamId: string, userId: string, transaction?: Transaction): Promise<Member> {
  const member = (await findMembers(teamId, transaction)).find(({ user }) => user.id === userId);
  if (member === undefined) throw new NotFoundError();
  return member;
}
