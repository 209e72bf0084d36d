import type { z } from 'zod';
import type { RunProgress } from '../../shared/jobs/contract.js';
import type { runResponse } from '../../shared/schemas/runs.js';
import type { Run } from '../models/run.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';
import { presentFunnel } from './funnel.js';
import { presentPerson } from './person.js';

/** A run. Unknown, revision and person must have been loaded with it; `progress` is that of a run under way. */
export function presentRun(actor: Actor, run: Run, progress: RunProgress | null): z.input<typeof runResponse> {
  const { unknown, revision } = run;
  if (unknown === undefined || revision === undefined) throw new Error('Unknown and revision were not loaded with the run.');
  return {
    id: run.id,
    unknownId: run.unknownId,
    unknownCode: unknown.code,
    unknownTitle: unknown.title,
    teamId: run.teamId,
    number: run.number,
    status: run.status,
    complete: run.complete,
    revisionId: run.revisionId,
    revisionNumber: revision.number,
    formula: revision.formula,
    settings: run.settings,
    startedBy: presentPerson(run.startedBy),
    createdAt: run.createdAt.toISOString(),
    startedAt: run.startedAt?.toISOString() ?? null,
    finishedAt: run.finishedAt?.toISOString() ?? null,
    constitutionCount: run.constitutionCount,
    multigraphCount: run.multigraphCount,
    survivorCount: run.survivorCount,
    keptCount: run.keptCount,
    cpuSeconds: run.cpuSeconds,
    noneOfTheseProbability: run.noneOfTheseProbability,
    funnel: presentFunnel(run.funnel),
    cuts: [...(run.cuts ?? [])],
    failure: run.failure,
    progress,
    abilities: abilitiesOn(actor, 'run', ['cancel', 'export', 'editShortlist'], run),
  };
}
