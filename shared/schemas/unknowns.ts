import { z } from 'zod';
import { RUN_STATUSES, UNKNOWN_STATUSES } from '../types/states.js';
import { abilities, id, pageOf, pageQuery, personName, timestamp } from './common.js';
import { evidenceDocument } from './evidence.js';
import { funnelSchema } from './runs.js';

export const unknownStatus = z.enum(UNKNOWN_STATUSES);
export const unknownParams = z.object({ unknownId: id });
export const unknownListQuery = pageQuery.extend({
  search: z.string().trim().max(120).default(''),
  status: z.union([unknownStatus, z.literal('all')]).default('all'),
  sort: z.enum(['code', 'title', 'status', 'formula', 'updatedAt']).default('updatedAt'),
  direction: z.enum(['ascending', 'descending']).default('descending'),
});
const unknownTitle = z.string().trim().min(1, { error: 'expected a title' }).max(160);
const unknownDescription = z.string().trim().max(4000);
/** Regulated purposes show a caution (SCIENCE.md 10). */
const unknownPurpose = z.enum(['research', 'regulated']);
export const unknownCreateRequest = z.object({
  title: unknownTitle,
  description: unknownDescription.default(''),
  purpose: unknownPurpose.default('research'),
});
/** Without defaults: what a change leaves out stays as it is. */
export const unknownUpdateRequest = z.object({
  title: unknownTitle.optional(),
  description: unknownDescription.optional(),
  purpose: unknownPurpose.optional(),
  status: unknownStatus.optional(),
});

export const runBrief = z.object({
  id,
  number: z.number().int(),
  status: z.enum(RUN_STATUSES),
  constitutionCount: z.number().nullable(),
  survivorCount: z.number().nullable(),
  funnel: funnelSchema.nullable(),
  finishedAt: timestamp.nullable(),
});
export const unknownRow = z.object({
  id,
  teamId: id,
  code: z.string(),
  title: z.string(),
  status: unknownStatus,
  formula: z.string().nullable(),
  createdBy: personName,
  createdAt: timestamp,
  updatedAt: timestamp,
  lastRun: runBrief.nullable(),
});
export const unknownPage = pageOf(unknownRow);
export const unknownResponse = unknownRow.extend({
  description: z.string(),
  purpose: z.enum(['research', 'regulated']),
  isDemo: z.boolean(),
  revisionCount: z.number().int(),
  currentRevisionId: id.nullable(),
  shortlistCount: z.number().int(),
  abilities: abilities(['update', 'shelve', 'saveEvidence', 'startRun', 'editShortlist', 'comment']),
});

export const revisionParams = z.object({ revisionId: id });
export const revisionRow = z.object({
  id,
  number: z.number().int(),
  author: personName,
  comment: z.string(),
  createdAt: timestamp,
  formula: z.string(),
  isCurrent: z.boolean(),
});
export const revisionList = z.object({ revisions: z.array(revisionRow) });
export const revisionResponse = revisionRow.extend({
  unknownId: id,
  evidence: evidenceDocument,
  notes: z.array(z.string()),
  abilities: abilities(['restore']),
});
export const revisionCreateRequest = z.object({
  evidence: evidenceDocument,
  comment: z.string().trim().max(500).default(''),
  /** Number of the revision the editor started from; a newer one in between answers 409 `revisionConflict`. */
  basedOn: z.number().int().min(0),
});

export const commentParams = z.object({ commentId: id });
export const commentRow = z.object({ id, author: personName, text: z.string(), createdAt: timestamp, abilities: abilities(['remove']) });
export const commentList = z.object({ comments: z.array(commentRow) });
export const commentCreateRequest = z.object({ text: z.string().trim().min(1, { error: 'expected a text' }).max(4000) });

export const teamFragmentParams = z.object({ fragmentId: id });
export const teamFragmentRow = z.object({
  id,
  name: z.string(),
  group: z.string(),
  smiles: z.string(),
  createdBy: personName,
  createdAt: timestamp,
  abilities: abilities(['remove']),
});
export const teamFragmentList = z.object({ fragments: z.array(teamFragmentRow) });
export const teamFragmentCreateRequest = z.object({
  name: z.string().trim().min(1, { error: 'expected a name' }).max(80),
  group: z.string().trim().max(40).default('Own'),
  smiles: z.string().trim().min(1, { error: 'expected a SMILES with * for each attachment point' }).max(300),
});
