import type { z } from 'zod';
import type { unknownCreateRequest } from '../../shared/schemas/unknowns.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { Team } from '../models/team.js';
import { Unknown, unknownCode } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';

/** Takes up a sample under the next number of its team. */
export async function createUnknown(
  context: AppContext,
  actor: Actor,
  teamId: string,
  input: z.output<typeof unknownCreateRequest>,
): Promise<Unknown> {
  return await context.sequelize.transaction(async (transaction) => {
    const team = await Team.findByPk(teamId, { transaction, lock: transaction.LOCK.UPDATE, rejectOnEmpty: true });
    const number = team.lastUnknownNumber + 1;
    await team.update({ lastUnknownNumber: number }, { transaction });
    const unknown = await Unknown.create(
      { ...input, teamId, number, code: unknownCode(number), createdById: actor.userId },
      { transaction },
    );
    await recordAudit(transaction, actor, 'unknown.create', { kind: 'unknown', id: unknown.id, label: unknown.code, teamId });
    return unknown;
  });
}
