import { createHash } from 'node:crypto';
import bcrypt from 'bcryptjs';
import { evidenceDocument } from '../../shared/schemas/evidence.js';
import type { TeamRole } from '../../shared/types/roles.js';
import { Candidate } from '../../server/models/candidate.js';
import { Comment } from '../../server/models/comment.js';
import { EvidenceRevision } from '../../server/models/evidence-revision.js';
import { Membership } from '../../server/models/membership.js';
import { Run } from '../../server/models/run.js';
import { Shortlist } from '../../server/models/shortlist.js';
import { ShortlistItem } from '../../server/models/shortlist-item.js';
import { Team } from '../../server/models/team.js';
import { TeamFragment } from '../../server/models/team-fragment.js';
import { Unknown, unknownCode } from '../../server/models/unknown.js';
import { User } from '../../server/models/user.js';

/** Password of every account made here. */
export const PASSWORD = 'spindle and loom';
// Hashed once: the cost of bcrypt is not what these tests are about.
const passwordHash = bcrypt.hashSync(PASSWORD, 10);

let count = 0;
const next = (): number => (count += 1);
const hash = (text: string): string => createHash('sha256').update(text).digest('hex');

export async function createUser(
  overrides: { name?: string; email?: string; isAdmin?: boolean; isDisabled?: boolean } = {},
): Promise<User> {
  const number = next();
  return await User.create({ name: `Person ${number}`, email: `person-${number}@laboratory.test`, passwordHash, ...overrides });
}

export async function createTeam(overrides: { name?: string; isDemo?: boolean } = {}): Promise<Team> {
  return await Team.create({ name: `Team ${next()}`, ...overrides });
}

/** A new person with that role in the team. */
export async function createMember(team: Team, role: TeamRole, overrides: Parameters<typeof createUser>[0] = {}): Promise<User> {
  const user = await createUser(overrides);
  await Membership.create({ teamId: team.id, userId: user.id, role });
  return user;
}

export async function createUnknown(team: Team, createdBy: User, overrides: { title?: string } = {}): Promise<Unknown> {
  const number = next();
  return await Unknown.create({
    teamId: team.id,
    number,
    code: unknownCode(number),
    title: 'Side fraction',
    description: '',
    purpose: 'research',
    createdById: createdBy.id,
    ...overrides,
  });
}

/** Saves evidence as the newest revision of the unknown. */
export async function createRevision(
  unknown: Unknown,
  author: User,
  evidence: Readonly<Record<string, unknown>> = { formula: 'C4H8O2' },
): Promise<EvidenceRevision> {
  const parsed = evidenceDocument.parse(evidence);
  const revision = await EvidenceRevision.create({
    teamId: unknown.teamId,
    unknownId: unknown.id,
    number: (await EvidenceRevision.count({ where: { unknownId: unknown.id } })) + 1,
    authorId: author.id,
    comment: '',
    formula: parsed.formula,
    evidence: parsed,
    notes: [],
  });
  await unknown.update({ currentRevisionId: revision.id, formula: parsed.formula });
  return revision;
}

export async function createRun(
  revision: EvidenceRevision,
  startedBy: User,
  overrides: Partial<Pick<Run, 'status' | 'complete' | 'keptCount' | 'startedAt' | 'finishedAt'>> = {},
): Promise<Run> {
  return await Run.create({
    teamId: revision.teamId,
    unknownId: revision.unknownId,
    number: (await Run.count({ where: { unknownId: revision.unknownId } })) + 1,
    revisionId: revision.id,
    settings: { keep: 100, maxSeconds: null },
    evidence: revision.evidence,
    startedById: startedBy.id,
    ...overrides,
  });
}

export async function createCandidate(run: Run, overrides: { rank?: number; smiles?: string; idcode?: string } = {}): Promise<Candidate> {
  const number = next();
  const idcode = overrides.idcode ?? `code${number}`;
  return await Candidate.create({
    teamId: run.teamId,
    runId: run.id,
    rank: (await Candidate.count({ where: { runId: run.id } })) + 1,
    smiles: 'CCOC(C)=O',
    idcode,
    idcodeHash: hash(idcode),
    keyHash: hash(`key ${number}`),
    probability: 0.5,
    score: -1,
    terms: {},
    carbonDeviation: null,
    protonDeviation: null,
    spectra: { carbons: [], protons: [] },
    matches: [],
    remarks: [],
    ...overrides,
  });
}

export async function createShortlistItem(candidate: Candidate, run: Run, addedBy: User): Promise<ShortlistItem> {
  const [shortlist] = await Shortlist.findOrCreate({
    where: { unknownId: run.unknownId },
    defaults: { unknownId: run.unknownId, teamId: run.teamId },
  });
  return await ShortlistItem.create({
    teamId: run.teamId,
    shortlistId: shortlist.id,
    unknownId: run.unknownId,
    candidateId: candidate.id,
    runId: run.id,
    smiles: candidate.smiles,
    idcode: candidate.idcode,
    idcodeHash: candidate.idcodeHash,
    note: '',
    snapshot: {
      runNumber: run.number,
      rank: candidate.rank,
      probability: candidate.probability,
      carbonDeviation: null,
      protonDeviation: null,
    },
    addedById: addedBy.id,
  });
}

export async function createComment(unknown: Unknown, author: User): Promise<Comment> {
  return await Comment.create({
    teamId: unknown.teamId,
    unknownId: unknown.id,
    authorId: author.id,
    text: 'Compare with the second batch.',
  });
}

export async function createTeamFragment(team: Team, createdBy: User): Promise<TeamFragment> {
  const number = next();
  return await TeamFragment.create({
    teamId: team.id,
    name: `Fragment ${number}`,
    group: 'Own',
    smiles: '*C(C)C',
    canonicalHash: hash(`fragment ${number}`),
    createdById: createdBy.id,
  });
}
