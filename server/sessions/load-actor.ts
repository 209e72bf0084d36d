import { QueryTypes, type Sequelize, type Transaction } from 'sequelize';
import type { TeamRole } from '../../shared/types/roles.js';
import type { Actor } from '../policies/actor.js';

interface ActorRow {
  readonly userId: string;
  readonly name: string;
  readonly email: string;
  /** Raw queries give BOOLEAN as 0 or 1. */
  readonly isAdmin: number;
  readonly teamId: string | null;
  readonly role: TeamRole | null;
}

/** Who an open session belongs to, with the roles of this moment; null when it has ended or the account is disabled. */
export async function loadActor(sequelize: Sequelize, sessionId: string, transaction?: Transaction): Promise<Actor | null> {
  const rows = await sequelize.query<ActorRow>(
    `SELECT u.id AS userId, u.name AS name, u.email AS email, u.is_admin AS isAdmin, m.team_id AS teamId, m.role AS role
       FROM sessions s
       JOIN users u ON u.id = s.user_id
       LEFT JOIN memberships m ON m.user_id = u.id
      WHERE s.id = :sessionId AND s.ended_at IS NULL AND s.expires_at > :now AND u.is_disabled = 0`,
    { type: QueryTypes.SELECT, replacements: { sessionId, now: new Date() }, ...(transaction === undefined ? {} : { transaction }) },
  );
  const first = rows[0];
  if (first === undefined) return null;
  return {
    userId: first.userId,
    name: first.name,
    email: first.email,
    isAdmin: first.isAdmin === 1,
    sessionId,
    roleByTeam: new Map(rows.flatMap(({ teamId, role }) => (teamId === null || role === null ? [] : [[teamId, role] as const]))),
  };
}
