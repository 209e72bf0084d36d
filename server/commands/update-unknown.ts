import type { z } from 'zod';
import type { unknownUpdateRequest } from '../../shared/schemas/unknowns.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import type { Unknown } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';

/** Changes title, description, purpose or status. */
export async function updateUnknown(
  context: AppContext,
  actor: Actor,
  unknown: Unknown,
  input: z.output<typeof unknownUpdateRequest>,
): Promise<void> {
  await context.sequelize.transaction(async (transaction) => {
    await unknown.reload({ transaction, lock: transaction.LOCK.UPDATE, include: [] });
    const given = Object.entries(input).filter(([field, value]) => value !== undefined && value !== unknown.get(field));
    if (given.length === 0) return;
    await unknown.update(Object.fromEntries(given), { transaction });
    const action = input.status === 'shelved' ? 'unknown.shelve' : 'unknown.update';
    await recordAudit(
      transaction,
      actor,
      action,
      { kind: 'unknown', id: unknown.id, label: unknown.code, teamId: unknown.teamId },
      { fields: given.map(([field]) => field) },
    );
  });
}
