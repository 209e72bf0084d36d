import type { TeamRole } from '../../shared/types/roles.js';
import type { Actor } from './actor.js';

/** What the rules look at; models satisfy these shapes. */
export interface TeamRow {
  readonly id: string;
}
export interface MemberRow {
  readonly teamId: string;
  readonly userId: string;
  readonly isLastLead: boolean;
}
export interface InvitationRow {
  readonly teamId: string;
}
export interface SessionRow {
  readonly userId: string;
}
export interface UserRow {
  readonly id: string;
}
export interface TeamOwnedRow {
  readonly teamId: string;
}
export interface CommentRow extends TeamOwnedRow {
  readonly authorId: string;
}
export interface FragmentRow extends TeamOwnedRow {
  readonly createdById: string;
}
export interface RunRow extends TeamOwnedRow {
  readonly startedById: string;
}
/** The installation as a whole, for actions that concern no row. */
export const INSTALLATION = { kind: 'installation' } as const;
export type InstallationRow = typeof INSTALLATION;

const hasRole = (actor: Actor, teamId: string, ...roles: TeamRole[]): boolean => {
  const role = actor.roleByTeam.get(teamId);
  return role !== undefined && roles.includes(role);
};
const isMember = (actor: Actor, row: TeamOwnedRow): boolean => actor.roleByTeam.has(row.teamId);
/** Chemists and leads do the science; readers look and comment; admins need a membership like everybody else. */
const mayWork = (actor: Actor, row: TeamOwnedRow): boolean => hasRole(actor, row.teamId, 'chemist', 'lead');
const isLead = (actor: Actor, teamId: string): boolean => hasRole(actor, teamId, 'lead');
/** People, roles and quotas of a team: its leads, and the admins of the installation. */
const runsTeam = (actor: Actor, teamId: string): boolean => actor.isAdmin || isLead(actor, teamId);
/** A team must not be left without a lead, unless an admin says so. */
const mayUnseat = (actor: Actor, row: MemberRow): boolean => runsTeam(actor, row.teamId) && (actor.isAdmin || !row.isLastLead);

/**
 * Every rule on who may do what. Whatever is not written here is denied. An action is `resource.verb`; each resource
 * has a `read`: who may not read a row is told that it does not exist.
 */
export const policies = {
  'installation.read': (_actor: Actor, _row: InstallationRow) => true,
  'installation.createTeam': (actor: Actor, _row: InstallationRow) => actor.isAdmin,
  'installation.manageUsers': (actor: Actor, _row: InstallationRow) => actor.isAdmin,
  'installation.readAudit': (actor: Actor, _row: InstallationRow) => actor.isAdmin,
  'installation.predict': (_actor: Actor, _row: InstallationRow) => true,

  'session.read': (actor: Actor, row: SessionRow) => row.userId === actor.userId,
  'session.end': (actor: Actor, row: SessionRow) => row.userId === actor.userId,

  'user.read': (actor: Actor, _row: UserRow) => actor.isAdmin,
  /** Not oneself: an installation must not lose its last admin by a slip. */
  'user.update': (actor: Actor, row: UserRow) => actor.isAdmin && row.id !== actor.userId,
  'user.issueResetLink': (actor: Actor, _row: UserRow) => actor.isAdmin,

  'team.read': (actor: Actor, row: TeamRow) => actor.isAdmin || actor.roleByTeam.has(row.id),
  'team.update': (actor: Actor, row: TeamRow) => runsTeam(actor, row.id),
  'team.readMembers': (actor: Actor, row: TeamRow) => actor.isAdmin || actor.roleByTeam.has(row.id),
  'team.manageMembers': (actor: Actor, row: TeamRow) => runsTeam(actor, row.id),
  'team.readUsage': (actor: Actor, row: TeamRow) => runsTeam(actor, row.id),
  'team.readOwnQuota': (actor: Actor, row: TeamRow) => actor.roleByTeam.has(row.id),
  'team.setQuotas': (actor: Actor, row: TeamRow) => runsTeam(actor, row.id),
  'team.readUnknowns': (actor: Actor, row: TeamRow) => actor.roleByTeam.has(row.id),
  'team.createUnknown': (actor: Actor, row: TeamRow) => hasRole(actor, row.id, 'chemist', 'lead'),
  'team.readFragments': (actor: Actor, row: TeamRow) => actor.roleByTeam.has(row.id),
  'team.createFragment': (actor: Actor, row: TeamRow) => hasRole(actor, row.id, 'chemist', 'lead'),
  'team.readRuns': (actor: Actor, row: TeamRow) => actor.roleByTeam.has(row.id),

  'member.read': (actor: Actor, row: MemberRow) => actor.isAdmin || isMember(actor, row),
  'member.changeRole': mayUnseat,
  'member.remove': mayUnseat,
  'member.setQuota': (actor: Actor, row: MemberRow) => runsTeam(actor, row.teamId),

  'invitation.read': (actor: Actor, row: InvitationRow) => actor.isAdmin || isMember(actor, row),
  'invitation.revoke': (actor: Actor, row: InvitationRow) => runsTeam(actor, row.teamId),

  'unknown.read': isMember,
  'unknown.update': mayWork,
  'unknown.shelve': mayWork,
  'unknown.saveEvidence': mayWork,
  'unknown.startRun': mayWork,
  'unknown.editShortlist': mayWork,
  'unknown.comment': isMember,

  'revision.read': isMember,
  'revision.restore': mayWork,

  'comment.read': isMember,
  'comment.remove': (actor: Actor, row: CommentRow) => isMember(actor, row) && row.authorId === actor.userId,

  'fragment.read': isMember,
  'fragment.remove': (actor: Actor, row: FragmentRow) =>
    isLead(actor, row.teamId) || (mayWork(actor, row) && row.createdById === actor.userId),

  'run.read': isMember,
  'run.cancel': (actor: Actor, row: RunRow) => isLead(actor, row.teamId) || (mayWork(actor, row) && row.startedById === actor.userId),
  'run.export': isMember,
  'run.explain': isMember,
  'run.editShortlist': mayWork,

  'candidate.read': isMember,
  'candidate.editShortlist': mayWork,

  'shortlistItem.read': isMember,
  'shortlistItem.update': mayWork,
  'shortlistItem.remove': mayWork,
} as const;

export type Action = keyof typeof policies;
export type Resource = Action extends `${infer R}.${string}` ? R : never;
/** What may be done to one kind of row: 'shelve' for 'unknown'. */
export type VerbOf<R extends Resource> = Extract<Action, `${R}.${string}`> extends `${R}.${infer V}` ? V : never;
/** The row a rule looks at. */
export type RowOf<A extends Action> = Parameters<(typeof policies)[A]>[1];
