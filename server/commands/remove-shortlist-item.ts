import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import type { ShortlistItem } from '../models/shortlist-item.js';
import { Unknown } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';

/** Strikes a candidate from the shortlist. */
export async function removeShortlistItem(context: AppContext, actor: Actor, item: ShortlistItem): Promise<void> {
  await context.sequelize.transaction(async (transaction) => {
    const unknown = await Unknown.findByPk(item.unknownId, { attributes: ['code'], transaction, rejectOnEmpty: true });
    await item.destroy({ transaction });
    const detail = { removed: item.smiles, verdict: item.verdict, note: item.note };
    await recordAudit(
      transaction,
      actor,
      'shortlistItem.remove',
      { kind: 'shortlist', id: item.id, label: `of ${unknown.code}`, teamId: item.teamId },
      detail,
    );
  });
}
