import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import type { Team } from '../models/team.js';
import type { Actor } from '../policies/actor.js';

export async function renameTeam({ sequelize }: AppContext, actor: Actor, team: Team, name: string): Promise<Team> {
  return await sequelize.transaction(async (transaction) => {
    await team.reload({ transaction, lock: transaction.LOCK.UPDATE });
    const before = team.name;
    await team.update({ name }, { transaction });
    await recordAudit(
      transaction,
      actor,
      'team.update',
      { kind: 'team', id: team.id, label: name, teamId: team.id },
      { before, after: name },
    );
    return team;
  });
}
