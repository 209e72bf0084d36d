/**
 * Every endpoint of the API in one table: method, path, schemas. The server mounts its routes by it, the API
 * reference is generated from it, and the client builds its calls on it. Paths are below /api/v1.
 */
import type { z } from 'zod';
import * as people from './people.js';
import * as runs from './runs.js';
import * as unknowns from './unknowns.js';

export interface Endpoint {
  readonly method: 'GET' | 'POST' | 'PATCH' | 'DELETE';
  readonly path: string;
  readonly summary: string;
  readonly params?: z.ZodType;
  readonly query?: z.ZodType;
  readonly body?: z.ZodType;
  /** Absent: 204 without a body, a file, or an event stream, as the summary says. */
  readonly response?: z.ZodType;
}

export const endpoints = {
  // People
  readInstallation: {
    method: 'GET',
    path: '/installation',
    summary: 'What the sign-in page may say: the accounts of the demo, if there is one. Needs no session.',
    response: people.installationResponse,
  },
  signIn: {
    method: 'POST',
    path: '/session',
    summary: 'Sign in; sets the session cookies.',
    body: people.signInRequest,
    response: people.meResponse,
  },
  signOut: { method: 'DELETE', path: '/session', summary: 'Sign out of this session.' },
  refreshSession: {
    method: 'POST',
    path: '/session/refresh',
    summary: 'Exchange the refresh cookie for a new pair.',
    response: people.meResponse,
  },
  me: { method: 'GET', path: '/me', summary: 'The signed-in person, memberships and abilities.', response: people.meResponse },
  listSessions: { method: 'GET', path: '/sessions', summary: 'Own open sessions.', response: people.sessionList },
  endSession: { method: 'DELETE', path: '/sessions/:sessionId', summary: 'End one of the own sessions.', params: people.sessionParams },
  requestPasswordReset: {
    method: 'POST',
    path: '/password-resets',
    summary: 'Send a reset link, if the address is known; answers the same either way.',
    body: people.passwordResetRequest,
  },
  resetPassword: {
    method: 'POST',
    path: '/password-resets/:token',
    summary: 'Set a new password with a reset link; ends all sessions.',
    params: people.tokenParams,
    body: people.setPasswordRequest,
  },
  readInvitation: {
    method: 'GET',
    path: '/invitations/:token',
    summary: 'What an invitation link is for.',
    params: people.tokenParams,
    response: people.invitationResponse,
  },
  acceptInvitation: {
    method: 'POST',
    path: '/invitations/:token',
    summary: 'Set name and password, join the team and sign in.',
    params: people.tokenParams,
    body: people.invitationAcceptRequest,
    response: people.meResponse,
  },
  // Teams
  listTeams: { method: 'GET', path: '/teams', summary: 'Own teams; for an admin, every team.', response: people.teamList },
  createTeam: {
    method: 'POST',
    path: '/teams',
    summary: 'Create a team (admin).',
    body: people.teamCreateRequest,
    response: people.teamResponse,
  },
  readTeam: { method: 'GET', path: '/teams/:teamId', summary: 'One team.', params: people.teamParams, response: people.teamResponse },
  updateTeam: {
    method: 'PATCH',
    path: '/teams/:teamId',
    summary: 'Rename a team.',
    params: people.teamParams,
    body: people.teamUpdateRequest,
    response: people.teamResponse,
  },
  listMembers: {
    method: 'GET',
    path: '/teams/:teamId/members',
    summary: 'Members and open invitations.',
    params: people.teamParams,
    response: people.memberList,
  },
  invite: {
    method: 'POST',
    path: '/teams/:teamId/invitations',
    summary: 'Invite a person by e-mail.',
    params: people.teamParams,
    body: people.inviteRequest,
    response: people.inviteResponse,
  },
  revokeInvitation: {
    method: 'DELETE',
    path: '/teams/:teamId/invitations/:invitationId',
    summary: 'Withdraw an invitation.',
    params: people.invitationParams,
  },
  changeRole: {
    method: 'PATCH',
    path: '/teams/:teamId/members/:userId',
    summary: 'Change the role of a member.',
    params: people.memberParams,
    body: people.roleChangeRequest,
    response: people.memberResponse,
  },
  removeMember: { method: 'DELETE', path: '/teams/:teamId/members/:userId', summary: 'Remove a member.', params: people.memberParams },
  setQuota: {
    method: 'PATCH',
    path: '/teams/:teamId/members/:userId/quota',
    summary: 'Override the quota of a member; an empty body returns to the role default.',
    params: people.memberParams,
    body: people.quotaOverrideRequest,
    response: people.quotaFigures,
  },
  readUsage: {
    method: 'GET',
    path: '/teams/:teamId/usage',
    summary: 'Usage of this month by person.',
    params: people.teamParams,
    response: people.usageResponse,
  },
  readOwnQuota: {
    method: 'GET',
    path: '/teams/:teamId/own-quota',
    summary: 'Own quota and what is used of it.',
    params: people.teamParams,
    response: people.ownQuotaResponse,
  },
  // Installation
  listUsers: { method: 'GET', path: '/users', summary: 'All people (admin).', response: people.userList },
  updateUser: {
    method: 'PATCH',
    path: '/users/:userId',
    summary: 'Disable a person or make an admin (admin).',
    params: people.userParams,
    body: people.userUpdateRequest,
    response: people.userRow,
  },
  createResetLink: {
    method: 'POST',
    path: '/users/:userId/password-reset',
    summary: 'Link with which a person sets a new password, to be handed over where no mail is sent (admin).',
    params: people.userParams,
    response: people.resetLinkResponse,
  },
  listAudit: {
    method: 'GET',
    path: '/audit',
    summary: 'Audit events, newest first (admin).',
    query: people.auditListQuery,
    response: people.auditList,
  },
  // Unknowns and evidence
  listUnknowns: {
    method: 'GET',
    path: '/teams/:teamId/unknowns',
    summary: 'Unknowns of a team.',
    params: people.teamParams,
    query: unknowns.unknownListQuery,
    response: unknowns.unknownPage,
  },
  createUnknown: {
    method: 'POST',
    path: '/teams/:teamId/unknowns',
    summary: 'Create an unknown.',
    params: people.teamParams,
    body: unknowns.unknownCreateRequest,
    response: unknowns.unknownResponse,
  },
  readUnknown: {
    method: 'GET',
    path: '/unknowns/:unknownId',
    summary: 'One unknown.',
    params: unknowns.unknownParams,
    response: unknowns.unknownResponse,
  },
  updateUnknown: {
    method: 'PATCH',
    path: '/unknowns/:unknownId',
    summary: 'Change title, description, purpose or status (shelve).',
    params: unknowns.unknownParams,
    body: unknowns.unknownUpdateRequest,
    response: unknowns.unknownResponse,
  },
  listRevisions: {
    method: 'GET',
    path: '/unknowns/:unknownId/revisions',
    summary: 'Evidence revisions, newest first.',
    params: unknowns.unknownParams,
    response: unknowns.revisionList,
  },
  createRevision: {
    method: 'POST',
    path: '/unknowns/:unknownId/revisions',
    summary: 'Save evidence as a new revision.',
    params: unknowns.unknownParams,
    body: unknowns.revisionCreateRequest,
    response: unknowns.revisionResponse,
  },
  readRevision: {
    method: 'GET',
    path: '/revisions/:revisionId',
    summary: 'One revision with its evidence.',
    params: unknowns.revisionParams,
    response: unknowns.revisionResponse,
  },
  restoreRevision: {
    method: 'POST',
    path: '/revisions/:revisionId/restore',
    summary: 'Save an old revision as the newest.',
    params: unknowns.revisionParams,
    response: unknowns.revisionResponse,
  },
  listComments: {
    method: 'GET',
    path: '/unknowns/:unknownId/comments',
    summary: 'Comments, oldest first.',
    params: unknowns.unknownParams,
    response: unknowns.commentList,
  },
  createComment: {
    method: 'POST',
    path: '/unknowns/:unknownId/comments',
    summary: 'Comment.',
    params: unknowns.unknownParams,
    body: unknowns.commentCreateRequest,
    response: unknowns.commentRow,
  },
  removeComment: { method: 'DELETE', path: '/comments/:commentId', summary: 'Remove an own comment.', params: unknowns.commentParams },
  listTeamFragments: {
    method: 'GET',
    path: '/teams/:teamId/fragments',
    summary: 'Fragments of the team library.',
    params: people.teamParams,
    response: unknowns.teamFragmentList,
  },
  createTeamFragment: {
    method: 'POST',
    path: '/teams/:teamId/fragments',
    summary: 'Add a fragment to the team library.',
    params: people.teamParams,
    body: unknowns.teamFragmentCreateRequest,
    response: unknowns.teamFragmentRow,
  },
  removeTeamFragment: {
    method: 'DELETE',
    path: '/fragments/:fragmentId',
    summary: 'Remove a fragment from the team library.',
    params: unknowns.teamFragmentParams,
  },
  // Runs
  startRun: {
    method: 'POST',
    path: '/unknowns/:unknownId/runs',
    summary: 'Start a run; 409 quotaExceeded with the figures when the quota does not allow it.',
    params: unknowns.unknownParams,
    body: runs.runStartRequest,
    response: runs.runResponse,
  },
  listRuns: {
    method: 'GET',
    path: '/unknowns/:unknownId/runs',
    summary: 'Runs of an unknown, newest first.',
    params: unknowns.unknownParams,
    response: runs.runList,
  },
  listTeamRuns: {
    method: 'GET',
    path: '/teams/:teamId/runs',
    summary: 'Runs of a team, newest first.',
    params: people.teamParams,
    query: runs.runListQuery,
    response: runs.runPage,
  },
  estimateRun: {
    method: 'POST',
    path: '/unknowns/:unknownId/estimate',
    summary: 'Size of the search by random probing.',
    params: unknowns.unknownParams,
    body: runs.runStartRequest,
    response: runs.estimateResponse,
  },
  readRun: {
    method: 'GET',
    path: '/runs/:runId',
    summary: 'One run with funnel and progress.',
    params: runs.runParams,
    response: runs.runResponse,
  },
  cancelRun: {
    method: 'POST',
    path: '/runs/:runId/cancel',
    summary: 'Cancel a queued or running run.',
    params: runs.runParams,
    response: runs.runResponse,
  },
  runEvents: {
    method: 'GET',
    path: '/runs/:runId/events',
    summary: 'Event stream: `progress` (at least once a second) and `run` (on status change).',
    params: runs.runParams,
  },
  listCandidates: {
    method: 'GET',
    path: '/runs/:runId/candidates',
    summary: 'Candidates of a run.',
    params: runs.runParams,
    query: runs.candidateListQuery,
    response: runs.candidatePage,
  },
  readCandidate: {
    method: 'GET',
    path: '/candidates/:candidateId',
    summary: 'One candidate with spectra and matches.',
    params: runs.candidateParams,
    response: runs.candidateResponse,
  },
  explainStructure: {
    method: 'POST',
    path: '/runs/:runId/explanations',
    summary: 'Why a structure is not in the ranking, or its rank.',
    params: runs.runParams,
    body: runs.explanationRequest,
    response: runs.explanationResponse,
  },
  exportCandidates: {
    method: 'GET',
    path: '/runs/:runId/export',
    summary: 'Candidates as a file: SMILES, SDF (V2000) or CSV.',
    params: runs.runParams,
    query: runs.exportQuery,
  },
  predict: {
    method: 'POST',
    path: '/predictions',
    summary: 'Predicted spectra of a drawn structure.',
    body: runs.predictRequest,
    response: runs.predictResponse,
  },
  // Shortlist
  readShortlist: {
    method: 'GET',
    path: '/unknowns/:unknownId/shortlist',
    summary: 'Shortlist of an unknown.',
    params: unknowns.unknownParams,
    response: runs.shortlistResponse,
  },
  addToShortlist: {
    method: 'POST',
    path: '/unknowns/:unknownId/shortlist',
    summary: 'Keep a candidate.',
    params: unknowns.unknownParams,
    body: runs.shortlistAddRequest,
    response: runs.shortlistItem,
  },
  updateShortlistItem: {
    method: 'PATCH',
    path: '/shortlist-items/:itemId',
    summary: 'Change verdict or note.',
    params: runs.shortlistItemParams,
    body: runs.shortlistUpdateRequest,
    response: runs.shortlistItem,
  },
  removeShortlistItem: {
    method: 'DELETE',
    path: '/shortlist-items/:itemId',
    summary: 'Strike an item out.',
    params: runs.shortlistItemParams,
  },
} as const satisfies Record<string, Endpoint>;
export type EndpointName = keyof typeof endpoints;
