import { createHash } from 'node:crypto';
import type { z } from 'zod';
import type { explanationResponse } from '../../shared/schemas/runs.js';
import type { AppContext } from '../app-context.js';
import { ask } from '../compute/ask.js';
import { Candidate } from '../models/candidate.js';
import type { Run } from '../models/run.js';

/** Tells why a structure is not in the ranking of a run, or where it is. */
export async function explainStructure(context: AppContext, run: Run, smiles: string): Promise<z.input<typeof explanationResponse>> {
  const explanation = await ask(context, 'explain', { evidence: run.evidence, settings: { ...run.settings, mode: 'rank' }, smiles });
  switch (explanation.kind) {
    case 'otherFormula':
      return explanation;
    case 'rejected': {
      const { kind, smiles: canonical, stage, reasons } = explanation;
      return { kind, smiles: canonical, stage, reasons: reasons.map((reason) => ({ ...reason, atoms: [...reason.atoms] })) };
    }
    case 'survives': {
      const keyHash = createHash('sha256').update(explanation.key).digest('hex');
      const kept = await Candidate.findOne({ where: { runId: run.id, keyHash }, attributes: ['id', 'rank', 'probability'] });
      if (kept !== null)
        return { kind: 'ranked', smiles: explanation.smiles, rank: kept.rank, candidateId: kept.id, probability: kept.probability };
      const lowest = await Candidate.findOne({ where: { runId: run.id }, attributes: ['score'], order: [['rank', 'DESC']] });
      const { smiles: canonical, score } = explanation;
      return { kind: 'notKept', smiles: canonical, score, lowestKeptScore: lowest?.score ?? null, runComplete: run.complete };
    }
  }
}
