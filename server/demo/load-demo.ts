import { evidenceDocument } from '../../shared/schemas/evidence.js';
import type { TeamRole } from '../../shared/types/roles.js';
import type { AppContext, DemoAccount } from '../app-context.js';
import { addToShortlist } from '../commands/add-to-shortlist.js';
import { commentOnUnknown } from '../commands/comment-on-unknown.js';
import { createUnknown } from '../commands/create-unknown.js';
import { explainStructure } from '../commands/explain-structure.js';
import { saveRevision } from '../commands/save-revision.js';
import { startRun } from '../commands/start-run.js';
import { updateShortlistItem } from '../commands/update-shortlist-item.js';
import { updateUnknown } from '../commands/update-unknown.js';
import { Comment } from '../models/comment.js';
import { EvidenceRevision } from '../models/evidence-revision.js';
import { Membership } from '../models/membership.js';
import { Run } from '../models/run.js';
import { ShortlistItem } from '../models/shortlist-item.js';
import { Team } from '../models/team.js';
import { Unknown } from '../models/unknown.js';
import { User } from '../models/user.js';
import type { Actor } from '../policies/actor.js';
import { hashPassword } from '../sessions/passwords.js';
import { createDemoPasswords, readDemoFile, writeDemoFile } from './demo-accounts.js';
import { DEMO_PEOPLE, DEMO_TEAM, DEMO_UNKNOWNS, type DemoUnknown } from './demo-data.js';

type LoadContext = Pick<AppContext, 'config' | 'sequelize' | 'logger' | 'mailer' | 'compute' | 'queue'>;

/**
 * Loads the invented laboratory into an empty database, through the same commands as people's own work and with runs
 * by the real engine. Going on after a start that was broken off, it does only what is missing.
 * @param announce - tells people what takes its time
 * @returns the accounts of the demo, also on later starts; none where it was never loaded
 */
export async function loadDemo(context: LoadContext, announce: (line: string) => void): Promise<readonly DemoAccount[]> {
  const { config } = context;
  if (!config.demo) return [];
  const known = readDemoFile(config.dataDirectory);
  const isEmpty = (await User.count()) === 0;
  if (!isEmpty && known === null) return [];
  const passwordByEmail = known?.passwordByEmail ?? createDemoPasswords();
  if (isEmpty || known?.isLoaded === false) {
    announce('Loading the invented laboratory of the demo …');
    writeDemoFile(config.dataDirectory, { isLoaded: false, passwordByEmail });
    await load(context, passwordByEmail, announce);
    writeDemoFile(config.dataDirectory, { isLoaded: true, passwordByEmail });
  }
  return await listAccounts(passwordByEmail);
}

async function listAccounts(passwordByEmail: Readonly<Record<string, string>>): Promise<DemoAccount[]> {
  const users = await User.findAll({ where: { email: DEMO_PEOPLE.map(({ email }) => email), isDisabled: false }, attributes: ['email'] });
  const present = new Set(users.map(({ email }) => email));
  return DEMO_PEOPLE.flatMap(({ email, name, role }) => {
    const password = passwordByEmail[email];
    return password === undefined || !present.has(email) ? [] : [{ email, name, role, password }];
  });
}

async function load(
  context: LoadContext,
  passwordByEmail: Readonly<Record<string, string>>,
  announce: (line: string) => void,
): Promise<void> {
  const [team] = await Team.findOrCreate({ where: { isDemo: true }, defaults: { name: DEMO_TEAM, isDemo: true } });
  const actorByRole = await loadPeople(context, team, passwordByEmail);
  for (const [index, demo] of DEMO_UNKNOWNS.entries()) {
    announce(`  ${index + 1} of ${DEMO_UNKNOWNS.length}: ${demo.title}`);
    await loadUnknown(context, team, actorByRole, demo);
  }
}

async function loadPeople(
  context: LoadContext,
  team: Team,
  passwordByEmail: Readonly<Record<string, string>>,
): Promise<Record<TeamRole, Actor>> {
  const actors: Partial<Record<TeamRole, Actor>> = {};
  for (const { email, name, role } of DEMO_PEOPLE) {
    const passwordHash = await hashPassword(context.config, passwordByEmail[email] ?? '');
    const [user] = await User.findOrCreate({ where: { email }, defaults: { email, name, passwordHash, isAdmin: role === 'admin' } });
    if (role === 'admin') continue;
    await Membership.findOrCreate({ where: { teamId: team.id, userId: user.id }, defaults: { teamId: team.id, userId: user.id, role } });
    actors[role] = { userId: user.id, name, email, isAdmin: false, sessionId: '', roleByTeam: new Map([[team.id, role]]) };
  }
  const { chemist, lead, reader } = actors;
  if (chemist === undefined || lead === undefined || reader === undefined) throw new Error('The demo lacks one of the roles of a team.');
  return { chemist, lead, reader };
}

async function loadUnknown(
  context: LoadContext,
  team: Team,
  actorByRole: Readonly<Record<TeamRole, Actor>>,
  demo: DemoUnknown,
): Promise<void> {
  const actor = actorByRole[demo.owner];
  const { title, description, purpose } = demo;
  const unknown =
    (await Unknown.findOne({ where: { teamId: team.id, title } })) ??
    (await createUnknown(context, actor, team.id, { title, description, purpose }));
  const savedCount = await EvidenceRevision.count({ where: { unknownId: unknown.id } });
  for (const [index, { comment, evidence }] of [...demo.revisions.entries()].slice(savedCount)) {
    await saveRevision(context, actor, unknown.id, { evidence: evidenceDocument.parse(evidence), comment, basedOn: index });
  }
  if (demo.run) await loadRun(context, actor, unknown, demo);
  const commentCount = await Comment.count({ where: { unknownId: unknown.id } });
  for (const { by, text } of demo.comments.slice(commentCount)) await commentOnUnknown(context, actorByRole[by], unknown, text);
  await updateUnknown(context, actor, unknown, { status: demo.status });
}

async function loadRun(context: LoadContext, actor: Actor, unknown: Unknown, demo: DemoUnknown): Promise<void> {
  const run = (await Run.findOne({ where: { unknownId: unknown.id } })) ?? (await startRun(context, actor, unknown.id, {}));
  await context.queue?.settled(run.id);
  await run.reload();
  if (run.status !== 'finished') {
    context.logger.warn({ runId: run.id, status: run.status, failure: run.failure }, 'a run of the demo did not finish');
    return;
  }
  for (const { smiles, verdict, note } of demo.shortlist ?? []) {
    const place = await explainStructure(context, run, smiles);
    if (place.kind !== 'ranked') continue;
    const kept = await ShortlistItem.findOne({ where: { unknownId: unknown.id, candidateId: place.candidateId } });
    const item = kept ?? (await addToShortlist(context, actor, unknown.id, { candidateId: place.candidateId, note }));
    await updateShortlistItem(context, actor, item, { verdict });
  }
}
