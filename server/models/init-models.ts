import type { Sequelize } from 'sequelize';
import { initAuditEvent } from './audit-event.js';
import { Candidate, initCandidate } from './candidate.js';
import { Comment, initComment } from './comment.js';
import { EvidenceRevision, initEvidenceRevision } from './evidence-revision.js';
import { initInvitation, Invitation } from './invitation.js';
import { initMembership, Membership } from './membership.js';
import { initOutboxMail } from './outbox-mail.js';
import { initPasswordReset } from './password-reset.js';
import { initQuota } from './quota.js';
import { initRun, Run } from './run.js';
import { initRunShard } from './run-shard.js';
import { initSession, Session } from './session.js';
import { initShortlist } from './shortlist.js';
import { initShortlistItem, ShortlistItem } from './shortlist-item.js';
import { initSignInAttempt } from './sign-in-attempt.js';
import { initTeam, Team } from './team.js';
import { initTeamFragment, TeamFragment } from './team-fragment.js';
import { initUnknown, Unknown } from './unknown.js';
import { initUsageEntry } from './usage-entry.js';
import { initUser, User } from './user.js';

/** Binds every model to a connection. Called once a process, before the first query. */
export function initModels(sequelize: Sequelize): void {
  for (const init of [
    initUser,
    initTeam,
    initMembership,
    initSession,
    initSignInAttempt,
    initInvitation,
    initPasswordReset,
    initOutboxMail,
    initAuditEvent,
    initQuota,
    initUnknown,
    initEvidenceRevision,
    initTeamFragment,
    initRun,
    initRunShard,
    initCandidate,
    initShortlist,
    initShortlistItem,
    initComment,
    initUsageEntry,
  ]) {
    init(sequelize);
  }
  associate();
}

/** Only the associations that queries include. Foreign keys themselves are made by the migrations. */
function associate(): void {
  User.hasMany(Membership, { as: 'memberships', foreignKey: 'userId' });
  Membership.belongsTo(User, { as: 'user', foreignKey: 'userId' });
  Membership.belongsTo(Team, { as: 'team', foreignKey: 'teamId' });
  Session.belongsTo(User, { as: 'user', foreignKey: 'userId' });
  Invitation.belongsTo(Team, { as: 'team', foreignKey: 'teamId' });
  Invitation.belongsTo(User, { as: 'invitedBy', foreignKey: 'invitedById' });
  Unknown.belongsTo(Team, { as: 'team', foreignKey: 'teamId' });
  Unknown.belongsTo(User, { as: 'createdBy', foreignKey: 'createdById' });
  Unknown.belongsTo(EvidenceRevision, { as: 'currentRevision', foreignKey: 'currentRevisionId' });
  EvidenceRevision.belongsTo(Unknown, { as: 'unknown', foreignKey: 'unknownId' });
  EvidenceRevision.belongsTo(User, { as: 'author', foreignKey: 'authorId' });
  TeamFragment.belongsTo(User, { as: 'createdBy', foreignKey: 'createdById' });
  Run.belongsTo(Unknown, { as: 'unknown', foreignKey: 'unknownId' });
  Run.belongsTo(EvidenceRevision, { as: 'revision', foreignKey: 'revisionId' });
  Run.belongsTo(User, { as: 'startedBy', foreignKey: 'startedById' });
  Candidate.belongsTo(Run, { as: 'run', foreignKey: 'runId' });
  ShortlistItem.belongsTo(User, { as: 'addedBy', foreignKey: 'addedById' });
  Comment.belongsTo(User, { as: 'author', foreignKey: 'authorId' });
}
