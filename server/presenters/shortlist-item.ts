import type { z } from 'zod';
import type { shortlistItem } from '../../shared/schemas/runs.js';
import type { ShortlistItem } from '../models/shortlist-item.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';
import { presentPerson } from './person.js';

export function presentShortlistItem(actor: Actor, item: ShortlistItem): z.input<typeof shortlistItem> {
  return {
    id: item.id,
    unknownId: item.unknownId,
    smiles: item.smiles,
    idcode: item.idcode,
    verdict: item.verdict,
    note: item.note,
    addedBy: presentPerson(item.addedBy),
    addedAt: item.createdAt.toISOString(),
    snapshot: { candidateId: item.candidateId, runId: item.runId, ...item.snapshot },
    abilities: abilitiesOn(actor, 'shortlistItem', ['update', 'remove'], item),
  };
}
