import { Transaction } from 'sequelize';
import type { z } from 'zod';
import type { EvidenceOptions } from '../../shared/schemas/evidence.js';
import type { runStartRequest } from '../../shared/schemas/runs.js';
import type { AppContext } from '../app-context.js';
import { recordAudit } from '../audit/record-audit.js';
import { ConflictError, UnavailableError } from '../errors.js';
import { Run } from '../models/run.js';
import { Unknown } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';
import { readQuota } from '../quotas/read-quota.js';
import { checkQuota, reserveUsage } from '../quotas/reservations.js';
import { chooseRevision } from './choose-revision.js';
import { requireConsistentEvidence } from './save-revision.js';

/**
 * Starts a run: reserves its share of the quota, freezes evidence and settings, hands it to the queue.
 * @throws ConflictError `quotaExceeded` with the figures, `noEvidence`, `unknownShelved`
 */
export async function startRun(
  context: AppContext,
  actor: Actor,
  unknownId: string,
  input: z.output<typeof runStartRequest>,
): Promise<Run> {
  const { compute, queue, sequelize } = context;
  if (compute === undefined || queue === undefined) throw new UnavailableError('noCompute', 'The server runs without its compute threads.');
  // Read committed: what is counted once the membership is locked must include what others committed while it was waited for.
  const run = await sequelize.transaction({ isolationLevel: Transaction.ISOLATION_LEVELS.READ_COMMITTED }, async (transaction) => {
    const now = new Date();
    const known = await Unknown.findByPk(unknownId, { attributes: ['teamId'], transaction, rejectOnEmpty: true });
    // The membership is locked first, here and wherever quotas are counted; only then the unknown.
    const { figures } = await readQuota(transaction, known.teamId, actor.userId);
    const unknown = await Unknown.findByPk(unknownId, { transaction, lock: transaction.LOCK.UPDATE, rejectOnEmpty: true });
    if (unknown.status === 'shelved') throw new ConflictError('unknownShelved', `${unknown.code} is shelved. Take it up again first.`);
    const revision = await chooseRevision(unknown, input.revisionId, transaction);
    requireConsistentEvidence(revision.evidence);

    const { options } = revision.evidence;
    // The figure in the evidence is a default that nobody may have looked at: it gives way to the quota, a request does not.
    const keep = input.keep ?? Math.min(options.keep, figures.candidatesPerRun);
    const maxSeconds = input.maxSeconds === undefined ? options.maxSeconds : input.maxSeconds;
    const maxConstitutions = input.maxConstitutions === undefined ? (options.maxConstitutions ?? null) : input.maxConstitutions;
    const maxCpuSeconds = maxSeconds === null ? null : maxSeconds * compute.threadCount;
    const reserved = await checkQuota(transaction, figures, { teamId: unknown.teamId, userId: actor.userId, keep, maxCpuSeconds }, now);

    const last = await Run.max<number | null, Run>('number', { where: { unknownId }, transaction });
    const created = await Run.create(
      {
        teamId: unknown.teamId,
        unknownId,
        number: (last ?? 0) + 1,
        revisionId: revision.id,
        settings: { keep, maxSeconds, maxConstitutions },
        evidence: { ...revision.evidence, options: withSettings(options, { keep, maxSeconds, maxConstitutions }) },
        startedById: actor.userId,
      },
      { transaction },
    );
    await reserveUsage(transaction, created, reserved, now);
    unknown.changed('updatedAt', true);
    await unknown.update(unknown.status === 'new' ? { status: 'inProgress' } : { updatedAt: now }, { transaction });
    await recordAudit(
      transaction,
      actor,
      'unknown.startRun',
      { kind: 'run', id: created.id, label: `${created.number} of ${unknown.code}`, teamId: unknown.teamId },
      { revision: revision.number, keep, maxSeconds, maxConstitutions },
    );
    return created;
  });
  queue.submit(run.id);
  return run;
}

/** Writes the settings of a run into the options of its evidence; in a document no limit is no key. */
function withSettings(options: EvidenceOptions, { keep, maxSeconds, maxConstitutions }: Run['settings']): EvidenceOptions {
  const { maxConstitutions: _replaced, ...others } = options;
  return { ...others, keep, maxSeconds, ...(typeof maxConstitutions === 'number' ? { maxConstitutions } : {}) };
}
