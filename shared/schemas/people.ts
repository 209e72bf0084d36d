import { z } from 'zod';
import { TEAM_ROLES } from '../types/roles.js';
import { abilities, emailAddress, id, newPassword, pageOf, pageQuery, timestamp } from './common.js';

export const teamRole = z.enum(TEAM_ROLES);

/** What the sign-in page may say before anyone is known. The list is empty unless the installation carries the demo. */
export const installationResponse = z.object({
  demoAccounts: z.array(z.object({ email: z.string(), name: z.string(), role: z.enum([...TEAM_ROLES, 'admin']), password: z.string() })),
});
export const signInRequest = z.object({
  email: emailAddress,
  password: z.string({ error: 'expected your password' }).min(1, { error: 'expected your password' }).max(200),
});
export const meResponse = z.object({
  user: z.object({ id, name: z.string(), email: z.string(), isAdmin: z.boolean() }),
  memberships: z.array(
    z.object({
      teamId: id,
      teamName: z.string(),
      role: teamRole,
      isDemo: z.boolean(),
      abilities: abilities(['readUnknowns', 'createUnknown', 'createFragment', 'manageMembers', 'readUsage', 'setQuotas']),
    }),
  ),
  abilities: abilities(['createTeam', 'manageUsers', 'readAudit']),
});
export const sessionParams = z.object({ sessionId: id });
export const sessionResponse = z.object({ id, createdAt: timestamp, lastUsedAt: timestamp, userAgent: z.string(), isCurrent: z.boolean() });
export const sessionList = z.object({ sessions: z.array(sessionResponse) });

export const passwordResetRequest = z.object({ email: emailAddress });
export const tokenParams = z.object({ token: z.string().min(20).max(200) });
export const setPasswordRequest = z.object({ password: newPassword });
export const invitationAcceptRequest = z.object({
  name: z.string().trim().min(1, { error: 'expected your name' }).max(120),
  password: newPassword,
});
/** What the set-password page shows before the password is set. */
export const invitationResponse = z.object({
  email: z.string(),
  teamName: z.string(),
  role: teamRole,
  invitedBy: z.string(),
  expiresAt: timestamp,
  needsAccount: z.boolean(),
});

export const teamParams = z.object({ teamId: id });
export const teamResponse = z.object({
  id,
  name: z.string(),
  isDemo: z.boolean(),
  createdAt: timestamp,
  abilities: abilities(['update', 'manageMembers', 'readUsage', 'setQuotas']),
});
export const teamList = z.object({ teams: z.array(teamResponse) });
export const teamCreateRequest = z.object({ name: z.string().trim().min(1, { error: 'expected a name' }).max(120) });
export const teamUpdateRequest = teamCreateRequest;
export const memberResponse = z.object({
  userId: id,
  name: z.string(),
  email: z.string(),
  role: teamRole,
  joinedAt: timestamp,
  abilities: abilities(['changeRole', 'remove', 'setQuota']),
});
export const invitationRow = z.object({
  id,
  email: z.string(),
  role: teamRole,
  invitedBy: z.string(),
  expiresAt: timestamp,
  abilities: abilities(['revoke']),
});
export const memberList = z.object({ members: z.array(memberResponse), invitations: z.array(invitationRow) });
export const inviteRequest = z.object({ email: emailAddress, role: teamRole });
/** The link is returned to the inviter too, because mail may not be set up. */
export const inviteResponse = z.object({ invitation: invitationRow, link: z.string() });
export const memberParams = z.object({ teamId: id, userId: id });
export const invitationParams = z.object({ teamId: id, invitationId: id });
export const roleChangeRequest = z.object({ role: teamRole });

export const quotaFigures = z.object({
  cpuSecondsPerMonth: z.number().int().min(0).max(1e9),
  candidatesPerRun: z.number().int().min(1).max(10_000),
  runsAtOnce: z.number().int().min(0).max(100),
});
export const quotaOverrideRequest = quotaFigures.partial();
export const usageResponse = z.object({
  month: z.string(),
  people: z.array(
    z.object({
      userId: id,
      name: z.string(),
      role: teamRole,
      usedCpuSeconds: z.number(),
      reservedCpuSeconds: z.number(),
      runCount: z.number(),
      quota: quotaFigures,
      isOverridden: z.boolean(),
    }),
  ),
});
/** The caller's own standing, shown in the run dialog. */
export const ownQuotaResponse = z.object({
  quota: quotaFigures,
  usedCpuSeconds: z.number(),
  reservedCpuSeconds: z.number(),
  runningCount: z.number(),
});

export const userParams = z.object({ userId: id });
export const userRow = z.object({
  id,
  name: z.string(),
  email: z.string(),
  isAdmin: z.boolean(),
  isDisabled: z.boolean(),
  createdAt: timestamp,
  teams: z.array(z.object({ teamId: id, teamName: z.string(), role: teamRole })),
  abilities: abilities(['update', 'issueResetLink']),
});
export const userList = z.object({ users: z.array(userRow) });
export const resetLinkResponse = z.object({ link: z.string(), expiresAt: timestamp });
export const userUpdateRequest = z.object({ isAdmin: z.boolean().optional(), isDisabled: z.boolean().optional() });
export const auditRow = z.object({
  id,
  at: timestamp,
  actor: z.string(),
  action: z.string(),
  subject: z.string(),
  teamId: id.nullable(),
  detail: z.record(z.string(), z.unknown()),
});
export const auditListQuery = pageQuery;
export const auditList = pageOf(auditRow);
