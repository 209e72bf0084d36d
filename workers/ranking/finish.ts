import { resolveOptions } from '../../shared/chemistry/resolve-options.js';
import type { JobContract, RankedCandidate, ShardCandidate, SignalMatch } from '../../shared/jobs/contract.js';
import type { EvidenceDocument } from '../../shared/schemas/evidence.js';
import { analyseStructure } from '../graph/analysis.js';
import { findEquivalence } from '../graph/equivalence.js';
import { canonicalStructure, reorderGraph } from '../graph/openchemlib.js';
import { unpackGraph } from '../graph/pack.js';
import { predictSpectra } from '../prediction/predict-spectra.js';
import { Environments } from './environments.js';
import { noneOfTheseLogLikelihood } from './none-of-these.js';
import { readCarbonObservations, readProtonObservations } from './observations.js';
import { selectRules } from './plausibility/active-rules.js';
import { createPosterior, type Posterior } from './posterior.js';
import { fitRemarks, plausibilityRemarks, stereoRemarks } from './remarks.js';
import { SCORE_MODEL } from './score-model.js';
import { Scorer } from './scorer.js';
import { SignalBounds } from './signal-bounds.js';
import { listCarbonMatches, listProtonMatches } from './signal-matches.js';

/**
 * Works out everything that is shown of the kept constitutions: SMILES, predicted spectra, the assignment signal by
 * signal, remarks, and probabilities over all survivors of the run, kept or not, and "none of these".
 *
 * @param input - `kept` in any order; `logSumExp` and `funnel` of all shards together.
 * @returns candidates by falling score, equal scores by key.
 */
export function finishRanking(input: JobContract['finish']['input']): JobContract['finish']['output'] {
  const { settings, kept, logSumExp, funnel } = input;
  const evidence = resolveOptions(input.evidence, settings.mode);
  const survivorCount = funnel.find(({ stage }) => stage === 'ranked')?.entered ?? kept.length;
  const posterior = createPosterior({
    logSumExp,
    survivorCount,
    noneOfTheseLogLikelihood: noneOfTheseLogLikelihood(readCarbonObservations(evidence), readProtonObservations(evidence), SCORE_MODEL),
    noneOfThesePrior: SCORE_MODEL.noneOfThesePrior,
  });
  const describe = createDescriber(evidence, settings.mode === 'rank');
  const ordered = [...kept].sort((a, b) => b.score - a.score || (a.key < b.key ? -1 : a.key > b.key ? 1 : 0));
  return {
    candidates: ordered.map((candidate, index) => describe(candidate, index + 1, posterior)),
    // Without scores there is nothing to weigh the list against.
    noneOfTheseProbability: settings.mode === 'rank' ? posterior.noneOfTheseProbability : 0,
  };
}

/** Without ranking only the structures are written out: a list can be long, and nobody looks at the spectra of each. */
function createDescriber(
  evidence: EvidenceDocument,
  isRanked: boolean,
): (candidate: ShardCandidate, rank: number, posterior: Posterior) => RankedCandidate {
  const { soft } = selectRules(evidence);
  const scorer = new Scorer(evidence, soft);
  const environments = new Environments();
  const bounds = new SignalBounds();
  const { temperature } = SCORE_MODEL;

  return (candidate, rank, posterior) => {
    const packed = unpackGraph(candidate.packed);
    const { smiles, idcode, order } = canonicalStructure(packed);
    if (!isRanked) return { ...unranked(candidate), rank, smiles, idcode };
    const graph = reorderGraph(packed, order);
    const structure = analyseStructure(graph);
    const spectra = predictSpectra(graph, evidence.options.solvent);
    const matches: SignalMatch[] = [];
    environments.find(structure);
    bounds.find(structure, environments);
    scorer.score(structure, environments, bounds);
    if (scorer.carbon !== null) matches.push(...listCarbonMatches(scorer.carbon, evidence, spectra, temperature.carbon));
    if (scorer.proton !== null) matches.push(...listProtonMatches(scorer.proton, evidence, spectra, temperature.proton));
    return {
      rank,
      key: candidate.key,
      smiles,
      idcode,
      probability: posterior.probabilityOf(candidate.score),
      score: candidate.score,
      terms: candidate.terms,
      carbonDeviation: meanDeviation(matches, '13C'),
      protonDeviation: meanDeviation(matches, '1H'),
      spectra,
      matches,
      remarks: [
        ...plausibilityRemarks(structure, soft),
        ...fitRemarks(structure, evidence, spectra, matches),
        ...stereoRemarks(findEquivalence(graph, structure)),
      ],
    };
  };
}

function unranked({ key, score, terms }: ShardCandidate): Omit<RankedCandidate, 'rank' | 'smiles' | 'idcode'> {
  return {
    key,
    score,
    terms,
    probability: 0,
    carbonDeviation: null,
    protonDeviation: null,
    spectra: { carbons: [], protons: [] },
    matches: [],
    remarks: [],
  };
}

/** Mean absolute deviation of the matched signals of a nucleus, ppm; null without any. */
function meanDeviation(matches: readonly SignalMatch[], nucleus: SignalMatch['nucleus']): number | null {
  const deviations = matches.flatMap((match) => (match.nucleus === nucleus && match.deviation !== null ? [Math.abs(match.deviation)] : []));
  return deviations.length === 0 ? null : deviations.reduce((sum, value) => sum + value, 0) / deviations.length;
}
