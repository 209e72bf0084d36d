import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { Team } from '../models/team.js';
import type { Actor } from '../policies/actor.js';

/** Creates a team without members: the admin invites its first lead. */
export async function createTeam({ sequelize }: AppContext, actor: Actor, name: string): Promise<Team> {
  return await sequelize.transaction(async (transaction) => {
    const team = await Team.create({ name }, { transaction });
    await recordAudit(transaction, actor, 'team.create', { kind: 'team', id: team.id, label: name, teamId: team.id });
    return team;
  });
}
