import type { z } from 'zod';
import type { runBrief, unknownResponse, unknownRow } from '../../shared/schemas/unknowns.js';
import type { Run } from '../models/run.js';
import type { Unknown } from '../models/unknown.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';
import type { UnknownCounts } from '../queries/unknowns.js';
import { presentFunnel } from './funnel.js';
import { presentPerson } from './person.js';

function presentRunBrief(run: Run): z.input<typeof runBrief> {
  const { id, number, status, constitutionCount, survivorCount, funnel, finishedAt } = run;
  return {
    id,
    number,
    status,
    constitutionCount,
    survivorCount,
    funnel: presentFunnel(funnel),
    finishedAt: finishedAt?.toISOString() ?? null,
  };
}

/** An unknown as lists show it. */
export function presentUnknownRow(unknown: Unknown, lastRun: Run | undefined): z.input<typeof unknownRow> {
  return {
    id: unknown.id,
    teamId: unknown.teamId,
    code: unknown.code,
    title: unknown.title,
    status: unknown.status,
    formula: unknown.formula,
    createdBy: presentPerson(unknown.createdBy),
    createdAt: unknown.createdAt.toISOString(),
    updatedAt: unknown.updatedAt.toISOString(),
    lastRun: lastRun === undefined ? null : presentRunBrief(lastRun),
  };
}

/** An unknown as its own page shows it. */
export function presentUnknown(
  actor: Actor,
  unknown: Unknown,
  lastRun: Run | undefined,
  counts: UnknownCounts,
): z.input<typeof unknownResponse> {
  return {
    ...presentUnknownRow(unknown, lastRun),
    description: unknown.description,
    purpose: unknown.purpose,
    isDemo: unknown.team?.isDemo ?? false,
    revisionCount: counts.revisionCount,
    currentRevisionId: unknown.currentRevisionId,
    shortlistCount: counts.shortlistCount,
    abilities: abilitiesOn(actor, 'unknown', ['update', 'shelve', 'saveEvidence', 'startRun', 'editShortlist', 'comment'], unknown),
  };
}
