/** Every migration, oldest first. Names are explicit, so that a source run and a build see the same ones. */
import { createUsers } from './20261201120000-create-users.js';
import { createTeams } from './20261201120100-create-teams.js';
import { createMemberships } from './20261201120200-create-memberships.js';
import { createSessions } from './20261201120300-create-sessions.js';
import { createInvitations } from './20261201120400-create-invitations.js';
import { createPasswordResets } from './20261201120500-create-password-resets.js';
import { createMailOutbox } from './20261201120600-create-mail-outbox.js';
import { createAuditEvents } from './20261201120700-create-audit-events.js';
import { createQuotas } from './20261201120800-create-quotas.js';
import { createUnknowns } from './20261201120900-create-unknowns.js';
import { createEvidenceRevisions } from './20261201121000-create-evidence-revisions.js';
import { addCurrentRevisionToUnknowns } from './20261201121100-add-current-revision-to-unknowns.js';
import { createFragments } from './20261201121200-create-fragments.js';
import { createRuns } from './20261201121300-create-runs.js';
import { createRunShards } from './20261201121400-create-run-shards.js';
import { createCandidates } from './20261201121500-create-candidates.js';
import { createShortlists } from './20261201121600-create-shortlists.js';
import { createShortlistItems } from './20261201121700-create-shortlist-items.js';
import { createComments } from './20261201121800-create-comments.js';
import { createUsageEntries } from './20261201121900-create-usage-entries.js';
import { createSignInAttempts } from './20261201122000-create-sign-in-attempts.js';
import { addCutsToRuns } from './20261201122100-add-cuts-to-runs.js';
import { noteCompletenessOnShortlistItems } from './20261201122200-note-completeness-on-shortlist-items.js';
import type { Migration } from './migration.js';

export const migrations: readonly Migration[] = [
  createUsers,
  createTeams,
  createMemberships,
  createSessions,
  createInvitations,
  createPasswordResets,
  createMailOutbox,
  createAuditEvents,
  createQuotas,
  createUnknowns,
  createEvidenceRevisions,
  addCurrentRevisionToUnknowns,
  createFragments,
  createRuns,
  createRunShards,
  createCandidates,
  createShortlists,
  createShortlistItems,
  createComments,
  createUsageEntries,
  createSignInAttempts,
  addCutsToRuns,
  noteCompletenessOnShortlistItems,
];
