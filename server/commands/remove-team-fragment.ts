import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import type { TeamFragment } from '../models/team-fragment.js';
import type { Actor } from '../policies/actor.js';

/** Takes a fragment out of the library. Evidence that uses it has a copy and stays as it is. */
export async function removeTeamFragment(context: AppContext, actor: Actor, fragment: TeamFragment): Promise<void> {
  await context.sequelize.transaction(async (transaction) => {
    await fragment.destroy({ transaction });
    await recordAudit(
      transaction,
      actor,
      'fragment.remove',
      { kind: 'fragment', id: fragment.id, label: fragment.name, teamId: fragment.teamId },
      { smiles: fragment.smiles },
    );
  });
}
