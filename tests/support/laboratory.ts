import type { EvidenceInput } from '../../shared/schemas/evidence.js';
import type { TeamRole } from '../../shared/types/roles.js';
import { EvidenceRevision } from '../../server/models/evidence-revision.js';
import type { Run } from '../../server/models/run.js';
import type { Team } from '../../server/models/team.js';
import type { Unknown } from '../../server/models/unknown.js';
import { UsageEntry } from '../../server/models/usage-entry.js';
import type { User } from '../../server/models/user.js';
import { usageMonth } from '../../server/quotas/read-usage.js';
import { createMember, createRevision, createRun, createTeam, createUnknown } from './factories.js';

export interface Laboratory {
  readonly team: Team;
  readonly people: Readonly<Record<TeamRole, User>>;
}

/** A team with one person of each role. */
export async function createLaboratory(): Promise<Laboratory> {
  const team = await createTeam();
  const [chemist, lead, reader] = [
    await createMember(team, 'chemist'),
    await createMember(team, 'lead'),
    await createMember(team, 'reader'),
  ];
  return { team, people: { chemist, lead, reader } };
}

/** An unknown with one evidence revision. */
export async function createUnknownWithEvidence(
  { team, people }: Laboratory,
  evidence: EvidenceInput = { formula: 'C4H10O' },
): Promise<Unknown> {
  const unknown = await createUnknown(team, people.chemist);
  await createRevision(unknown, people.chemist, evidence);
  return unknown;
}

/** A queued run as a command would leave it, with CPU seconds reserved. */
export async function createQueuedRun(
  laboratory: Laboratory,
  unknown: Unknown,
  {
    settings = { keep: 10, maxSeconds: null },
    reservedCpuSeconds = 1_000,
    startedBy = laboratory.people.chemist,
  }: Partial<{ settings: Run['settings']; reservedCpuSeconds: number; startedBy: User }> = {},
): Promise<Run> {
  const revision = await EvidenceRevision.findByPk(unknown.currentRevisionId ?? '', { rejectOnEmpty: true });
  const run = await createRun(revision, startedBy);
  await run.update({ settings });
  await UsageEntry.create({
    teamId: unknown.teamId,
    userId: startedBy.id,
    runId: run.id,
    month: usageMonth(new Date()),
    kind: 'reserved',
    cpuSeconds: reservedCpuSeconds,
  });
  return run;
}
