import type { z } from 'zod';
import type { candidateResponse, candidateRow } from '../../shared/schemas/runs.js';
import type { Candidate } from '../models/candidate.js';
import type { Actor } from '../policies/actor.js';
import { abilitiesOn } from '../policies/authorize.js';

export function presentCandidateRow(candidate: Candidate, shortlistItemId: string | null): z.input<typeof candidateRow> {
  return {
    id: candidate.id,
    runId: candidate.runId,
    rank: candidate.rank,
    smiles: candidate.smiles,
    idcode: candidate.idcode,
    probability: candidate.probability,
    score: candidate.score,
    terms: candidate.terms,
    carbonDeviation: candidate.carbonDeviation,
    protonDeviation: candidate.protonDeviation,
    remarks: candidate.remarks.map((remark) => ({ ...remark, atoms: [...remark.atoms] })),
    shortlistItemId,
  };
}

/** A candidate as its own page shows it. */
export function presentCandidate(
  actor: Actor,
  candidate: Candidate,
  around: {
    readonly unknownId: string;
    readonly runComplete: boolean;
    readonly shortlistItemId: string | null;
    readonly previousId: string | null;
    readonly nextId: string | null;
  },
): z.input<typeof candidateResponse> {
  const { carbons, protons } = candidate.spectra;
  return {
    ...presentCandidateRow(candidate, around.shortlistItemId),
    unknownId: around.unknownId,
    runComplete: around.runComplete,
    spectra: {
      carbons: carbons.map((carbon) => ({ ...carbon, atoms: [...carbon.atoms] })),
      protons: protons.map((proton) => ({ ...proton, atoms: [...proton.atoms], couplings: [...proton.couplings] })),
    },
    matches: candidate.matches.map((match) => ({ ...match, predictedIndexes: [...match.predictedIndexes] })),
    previousId: around.previousId,
    nextId: around.nextId,
    abilities: abilitiesOn(actor, 'candidate', ['editShortlist'], candidate),
  };
}
