import type { z } from 'zod';
import type { revisionResponse, revisionRow } from '../../shared/schemas/unknowns.js';
import type { EvidenceRevision } from '../models/evidence-revision.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';
import { presentPerson } from './person.js';

export function presentRevisionRow(revision: EvidenceRevision, currentRevisionId: string | null): z.input<typeof revisionRow> {
  return {
    id: revision.id,
    number: revision.number,
    author: presentPerson(revision.author),
    comment: revision.comment,
    createdAt: revision.createdAt.toISOString(),
    formula: revision.formula,
    isCurrent: revision.id === currentRevisionId,
  };
}

/** A revision with its evidence. The unknown must have been loaded with it. */
export function presentRevision(actor: Actor, revision: EvidenceRevision): z.input<typeof revisionResponse> {
  return {
    ...presentRevisionRow(revision, revision.unknown?.currentRevisionId ?? null),
    unknownId: revision.unknownId,
    evidence: revision.evidence,
    notes: revision.notes,
    abilities: abilitiesOn(actor, 'revision', ['restore'], revision),
  };
}
