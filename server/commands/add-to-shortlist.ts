import type { z } from 'zod';
import type { shortlistAddRequest } from '../../shared/schemas/runs.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { ConflictError, InvalidInputError } from '../errors.js';
import { Candidate } from '../models/candidate.js';
import { Run } from '../models/run.js';
import { Shortlist } from '../models/shortlist.js';
import { ShortlistItem } from '../models/shortlist-item.js';
import { Unknown } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';

/**
 * Keeps a candidate on the shortlist of its unknown, with the figures it has now: they outlive its run.
 * @throws InvalidInputError when the candidate is not one of this unknown
 * @throws ConflictError `alreadyShortlisted`, whichever run it came from
 */
export async function addToShortlist(
  context: AppContext,
  actor: Actor,
  unknownId: string,
  input: z.output<typeof shortlistAddRequest>,
): Promise<ShortlistItem> {
  return await context.sequelize.transaction(async (transaction) => {
    const unknown = await Unknown.findByPk(unknownId, { transaction, lock: transaction.LOCK.UPDATE, rejectOnEmpty: true });
    const candidate = await Candidate.findOne({
      where: { id: input.candidateId, teamId: unknown.teamId },
      include: [{ model: Run, as: 'run', attributes: ['id', 'number', 'complete'], required: true, where: { unknownId } }],
      transaction,
    });
    if (candidate === null || candidate.run === undefined) {
      throw new InvalidInputError([{ path: 'candidateId', message: `expected a candidate of a run of ${unknown.code}` }]);
    }
    const [shortlist] = await Shortlist.findOrCreate({
      where: { unknownId },
      defaults: { teamId: unknown.teamId, unknownId },
      transaction,
    });
    const kept = await ShortlistItem.findOne({ where: { shortlistId: shortlist.id, idcodeHash: candidate.idcodeHash }, transaction });
    if (kept !== null) throw new ConflictError('alreadyShortlisted', 'This structure is on the shortlist already.');
    const { smiles, idcode, idcodeHash, rank, probability, carbonDeviation, protonDeviation } = candidate;
    const item = await ShortlistItem.create(
      {
        teamId: unknown.teamId,
        shortlistId: shortlist.id,
        unknownId,
        candidateId: candidate.id,
        runId: candidate.runId,
        smiles,
        idcode,
        idcodeHash,
        note: input.note,
        snapshot: {
          runNumber: candidate.run.number,
          runComplete: candidate.run.complete,
          rank,
          probability,
          carbonDeviation,
          protonDeviation,
        },
        addedById: actor.userId,
      },
      { transaction },
    );
    await recordAudit(
      transaction,
      actor,
      'unknown.editShortlist',
      { kind: 'shortlist', id: item.id, label: `of ${unknown.code}`, teamId: unknown.teamId },
      { added: smiles },
    );
    return item;
  });
}
