import type { z } from 'zod';
import type { shortlistUpdateRequest } from '../../shared/schemas/runs.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import type { ShortlistItem } from '../models/shortlist-item.js';
import { Unknown } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';

/** Changes verdict or note of a shortlisted candidate. */
export async function updateShortlistItem(
  context: AppContext,
  actor: Actor,
  item: ShortlistItem,
  input: z.output<typeof shortlistUpdateRequest>,
): Promise<void> {
  await context.sequelize.transaction(async (transaction) => {
    const unknown = await Unknown.findByPk(item.unknownId, { attributes: ['code'], transaction, rejectOnEmpty: true });
    const before = item.verdict;
    await item.update(
      { ...(input.verdict === undefined ? {} : { verdict: input.verdict }), ...(input.note === undefined ? {} : { note: input.note }) },
      { transaction },
    );
    const detail = { smiles: item.smiles, ...(before === item.verdict ? {} : { verdict: item.verdict, before }) };
    await recordAudit(
      transaction,
      actor,
      'shortlistItem.update',
      { kind: 'shortlist', id: item.id, label: `of ${unknown.code}`, teamId: item.teamId },
      detail,
    );
  });
}
