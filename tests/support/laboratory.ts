import { randomUUID } from 'node:crypto';
import { evidenceDocument, type EvidenceInput } from '../../shared/schemas/evidence.js';
import type { TeamRole } from '../../shared/types/roles.js';
import { EvidenceRevision } from '../../server/models/evidence-revision.js';
import { Membership } from '../../server/models/membership.js';
import { Run } from '../../server/models/run.js';
import { Team } from '../../server/models/team.js';
import { Unknown, unknownCode } from '../../server/models/unknown.js';
import { UsageEntry } from '../../server/models/usage-entry.js';
import { User } from '../../server/models/user.js';
import { usageMonth } from '../../server/quotas/read-usage.js';

export interface Laboratory {
  readonly team: Team;
  readonly people: Readonly<Record<TeamRole, User>>;
}

/** A team with one person of each role. Nobody can sign in by password: the hash is none. */
export async function createLaboratory(name = 'Laboratory'): Promise<Laboratory> {
  const team = await Team.create({ name: `${name} ${randomUUID()}` });
  const join = async (role: TeamRole) => {
    const user = await User.create({ email: `${role}-${randomUUID()}@example.test`, name: `The ${role}`, passwordHash: '-' });
    await Membership.create({ teamId: team.id, userId: user.id, role });
    return user;
  };
  return { team, people: { chemist: await join('chemist'), lead: await join('lead'), reader: await join('reader') } };
}

/** An unknown with one evidence revision. */
export async function createUnknownRow({ team, people }: Laboratory, evidence: EvidenceInput = { formula: 'C4H10O' }): Promise<Unknown> {
  const number = team.lastUnknownNumber + 1;
  await team.update({ lastUnknownNumber: number });
  const unknown = await Unknown.create({
    teamId: team.id, number, code: unknownCode(number), title: `Sample ${number}`, description: '', purpose: 'research', createdById: people.chemist.id,
  });
  const revision = await EvidenceRevision.create({
    teamId: team.id, unknownId: unknown.id, number: 1, authorId: people.chemist.id, comment: '', formula: evidence.formula, evidence: evidenceDocument.parse(evidence), notes: [],
  });
  return await unknown.update({ currentRevisionId: revision.id, formula: revision.formula });
}

/** A queued run as a command would leave it, with CPU seconds reserved. */
export async function createRunRow(
  laboratory: Laboratory,
  unknown: Unknown,
  { settings = { keep: 10, maxSeconds: null }, reservedCpuSeconds = 1_000, startedBy = laboratory.people.chemist }: Partial<{ settings: Run['settings']; reservedCpuSeconds: number; startedBy: User }> = {},
): Promise<Run> {
  const revision = await EvidenceRevision.findByPk(unknown.currentRevisionId ?? '', { rejectOnEmpty: true });
  const number = 1 + (await Run.count({ where: { unknownId: unknown.id } }));
  const run = await Run.create({
    teamId: unknown.teamId, unknownId: unknown.id, number, revisionId: revision.id, settings, evidence: revision.evidence, startedById: startedBy.id,
  });
  await UsageEntry.create({ teamId: unknown.teamId, userId: startedBy.id, runId: run.id, month: usageMonth(new Date()), kind: 'reserved', cpuSeconds: reservedCpuSeconds });
  return run;
}
