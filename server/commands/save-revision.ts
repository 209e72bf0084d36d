import type { Transaction } from 'sequelize';
import { checkEvidence } from '../../shared/chemistry/check-evidence.js';
import { formatHill, parseFormula } from '../../shared/chemistry/formula.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { ConflictError, InvalidInputError } from '../errors.js';
import { EvidenceRevision } from '../models/evidence-revision.js';
import { Unknown } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';

/** Checks that the pieces of an evidence document agree; paths begin with `evidence.`, as in the request. */
export function requireConsistentEvidence(evidence: EvidenceDocument): { readonly notes: readonly string[] } {
  const { issues, notes } = checkEvidence(evidence);
  if (issues.length > 0) throw new InvalidInputError(issues.map(({ path, message }) => ({ path: `evidence.${path}`, message })));
  return { notes };
}

export interface RevisionInput {
  readonly evidence: EvidenceDocument;
  readonly comment: string;
  /** Number of the revision the editor started from; 0 = none. */
  readonly basedOn: number;
}

/**
 * Saves evidence as the next revision of an unknown.
 * @throws InvalidInputError when its pieces contradict one another
 * @throws ConflictError `revisionConflict` when somebody else saved in between
 */
export async function saveRevision(context: AppContext, actor: Actor, unknownId: string, input: RevisionInput): Promise<EvidenceRevision> {
  const { notes } = requireConsistentEvidence(input.evidence);
  return await context.sequelize.transaction(async (transaction) => {
    const unknown = await Unknown.findByPk(unknownId, { transaction, lock: transaction.LOCK.UPDATE, rejectOnEmpty: true });
    const latest = await latestNumber(unknownId, transaction);
    if (latest !== input.basedOn) {
      throw new ConflictError(
        'revisionConflict',
        `Somebody saved revision ${latest} meanwhile. Compare it with yours and save again on top of it.`,
        {
          basedOn: input.basedOn,
          latest,
        },
      );
    }
    return await addRevision(transaction, actor, unknown, { evidence: input.evidence, comment: input.comment, notes, number: latest + 1 });
  });
}

/**
 * Saves the evidence of an old revision as the newest one.
 * @throws ConflictError `alreadyCurrent` when it is the newest
 */
export async function restoreRevision(context: AppContext, actor: Actor, old: EvidenceRevision): Promise<EvidenceRevision> {
  const { notes } = requireConsistentEvidence(old.evidence);
  return await context.sequelize.transaction(async (transaction) => {
    const unknown = await Unknown.findByPk(old.unknownId, { transaction, lock: transaction.LOCK.UPDATE, rejectOnEmpty: true });
    if (unknown.currentRevisionId === old.id)
      throw new ConflictError('alreadyCurrent', `Revision ${old.number} is the current one already.`);
    const number = (await latestNumber(unknown.id, transaction)) + 1;
    return await addRevision(transaction, actor, unknown, {
      evidence: old.evidence,
      comment: `Revision ${old.number} restored`,
      notes,
      number,
    });
  });
}

async function latestNumber(unknownId: string, transaction: Transaction): Promise<number> {
  return (await EvidenceRevision.max<number | null, EvidenceRevision>('number', { where: { unknownId }, transaction })) ?? 0;
}

interface NewRevision {
  readonly evidence: EvidenceDocument;
  readonly comment: string;
  readonly notes: readonly string[];
  readonly number: number;
}

async function addRevision(
  transaction: Transaction,
  actor: Actor,
  unknown: Unknown,
  { evidence, comment, notes, number }: NewRevision,
): Promise<EvidenceRevision> {
  const parsed = parseFormula(evidence.formula);
  const formula = parsed.ok ? formatHill(parsed.counts) : evidence.formula;
  const revision = await EvidenceRevision.create(
    {
      teamId: unknown.teamId,
      unknownId: unknown.id,
      number,
      authorId: actor.userId,
      comment,
      formula,
      evidence: { ...evidence, formula },
      notes: [...notes],
    },
    { transaction },
  );
  await unknown.update({ currentRevisionId: revision.id, formula }, { transaction });
  await recordAudit(
    transaction,
    actor,
    'unknown.saveEvidence',
    { kind: 'unknown', id: unknown.id, label: unknown.code, teamId: unknown.teamId },
    { revision: number },
  );
  return revision;
}
