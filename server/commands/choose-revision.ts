import type { Transaction } from 'sequelize';
import { ConflictError, InvalidInputError } from '../errors.js';
import { EvidenceRevision } from '../models/evidence-revision.js';
import type { Unknown } from '../models/unknown.js';

/**
 * The revision a run or an estimate is about: the one asked for, or the current one.
 * @throws ConflictError `noEvidence` when nothing has been saved yet
 * @throws InvalidInputError when the revision is not of this unknown
 */
export async function chooseRevision(
  unknown: Unknown,
  revisionId: string | undefined,
  transaction?: Transaction,
): Promise<EvidenceRevision> {
  const id = revisionId ?? unknown.currentRevisionId;
  if (id === null) throw new ConflictError('noEvidence', 'There is no evidence yet. Save at least a molecular formula first.');
  const revision = await EvidenceRevision.findOne({
    where: { id, unknownId: unknown.id },
    ...(transaction === undefined ? {} : { transaction }),
  });
  if (revision === null) throw new InvalidInputError([{ path: 'revisionId', message: `expected a revision of ${unknown.code}` }]);
  return revision;
}
