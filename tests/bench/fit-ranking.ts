/*
 * Fits the temperatures of the score and the odds of the soft plausibility rules on the open NMR data:
 * npm run bench -- fit-ranking [--limit N] [--seconds S] [--to HEAVY_ATOMS]
 * Conditional likelihood of the true structure among the survivors (the best of them and a weighted random sample of the
 * others), on fold 0, which the shift predictor was not fitted on; odds are drawn towards their present values. Four-fold
 * cross-validation says what the fit is worth. Prints numbers; score-model.ts and shared/plausibility/rules.ts are changed by hand.
 */
import { parseArgs } from 'node:util';
import { analyseStructure } from '../../workers/graph/analysis.js';
import { unpackGraph } from '../../workers/graph/pack.js';
import { selectRules } from '../../workers/ranking/plausibility/active-rules.js';
import { SCORE_MODEL } from '../../workers/ranking/score-model.js';
import { PLAUSIBILITY_RULES } from '../../shared/plausibility/rules.js';
import type { ScoreTerms } from '../../shared/jobs/contract.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { readRankingCases, runCase, type CaseResult } from '../support/ranking-cases.js';

const { values } = parseArgs({
  args: process.argv.slice(2).filter((argument) => argument !== '--'),
  options: { limit: { type: 'string', default: '300' }, seconds: { type: 'string', default: '8' }, to: { type: 'string', default: '10' } },
});

const RULES = PLAUSIBILITY_RULES.filter(({ kind }) => kind === 'soft');
/** 1/T of carbon and proton terms, then the penalty of each rule. */
const PRESENT = [1 / SCORE_MODEL.temperature.carbon, 1 / SCORE_MODEL.temperature.proton, ...RULES.map(({ penalty }) => penalty)];
/** Strength with which each parameter is held to its present value: temperatures are free, rules seen a few times are not. */
const HOLD = [0, 0, ...RULES.map(() => 0.15)];
const ROUNDS = 300;

/** One case: features of the truth and of the others, −features times parameters being the cost. */
interface Sample {
  readonly truth: Float64Array;
  readonly others: readonly { readonly features: Float64Array; readonly logWeight: number }[];
}

const cases = readRankingCases();
if (cases === null) process.exit(0);
const eligible = cases.filter(({ fold, heavyAtoms }) => fold === 0 && heavyAtoms <= Number(values.to));
const count = Math.min(Number(values.limit), eligible.length);
const samples: Sample[] = [];
for (let i = 0; i < count; i++) {
  const result = runCase(eligible[Math.floor((i * eligible.length) / count)], Number(values.seconds), 150);
  if (result !== null && result.rank !== null && result.candidates.length > 0) samples.push(sampleOf(result));
}
console.log(`${samples.length} cases of ${count}`);
const everything = samples.map((_, index) => index);
const held = (part: number): number[] => everything.filter((index) => index % 4 === part);
let fittedLoss = 0;
let presentLoss = 0;
for (let part = 0; part < 4; part++) {
  const fitted = fit(everything.filter((index) => index % 4 !== part));
  fittedLoss += loss(fitted, held(part));
  presentLoss += loss(PRESENT, held(part));
}
console.log(
  `−ln P(truth) per case left out: fitted ${(fittedLoss / samples.length).toFixed(3)}, present ${(presentLoss / samples.length).toFixed(3)}`,
);
const final = fit(everything);
console.log(
  `temperature: carbon ${(1 / final[0]).toFixed(2)} (present ${SCORE_MODEL.temperature.carbon}), proton ${(1 / final[1]).toFixed(2)} (present ${SCORE_MODEL.temperature.proton})`,
);
RULES.forEach(({ id, penalty }, r) => {
  const inTruths = samples.filter(({ truth }) => truth[2 + r] < 0).length;
  console.log(`  ${id.padEnd(28)} ${final[2 + r].toFixed(2)}  present ${penalty}  in ${inTruths} true structures`);
});

function sampleOf({ evidence, truth, truthTerms, candidates }: CaseResult): Sample {
  const { soft } = selectRules(evidence);
  const features = (terms: ScoreTerms, graph: MolecularGraph): Float64Array => {
    const row = new Float64Array(PRESENT.length);
    row[0] = (terms.carbon13 ?? 0) * SCORE_MODEL.temperature.carbon;
    row[1] = ((terms.proton1 ?? 0) + (terms.multiplicity ?? 0) + (terms.integral ?? 0)) * SCORE_MODEL.temperature.proton;
    const structure = analyseStructure(graph);
    for (const { rule, test } of soft) row[2 + RULES.findIndex(({ id }) => id === rule.id)] = -test(structure, null);
    return row;
  };
  return {
    truth: features(truthTerms, truth),
    others: candidates.map(({ terms, packed, weight }) => ({
      features: features(terms, unpackGraph(packed)),
      logWeight: Math.log(weight),
    })),
  };
}

function dot(a: Float64Array, b: readonly number[]): number {
  let sum = 0;
  for (let k = 0; k < a.length; k++) sum += a[k] * b[k];
  return sum;
}

/** Sum of −ln P(truth) over cases; adds its gradient to `gradient` when given. */
function loss(parameters: readonly number[], indexes: readonly number[], gradient?: Float64Array): number {
  let total = 0;
  for (const index of indexes) {
    const { truth, others } = samples[index];
    const own = dot(truth, parameters);
    const scores = others.map(({ features, logWeight }) => dot(features, parameters) + logWeight);
    const highest = Math.max(own, ...scores);
    const sum = scores.reduce((acc, score) => acc + Math.exp(score - highest), Math.exp(own - highest));
    total -= own - highest - Math.log(sum);
    if (gradient === undefined) continue;
    const ownShare = Math.exp(own - highest) / sum;
    for (let k = 0; k < truth.length; k++) gradient[k] -= truth[k] * (1 - ownShare);
    others.forEach(({ features }, c) => {
      const share = Math.exp(scores[c] - highest) / sum;
      for (let k = 0; k < features.length; k++) gradient[k] += features[k] * share;
    });
  }
  return total;
}

/** Minimises loss + hold by gradient steps of adaptive size; parameters stay positive. The function is convex. */
function fit(indexes: readonly number[]): number[] {
  const value = (parameters: readonly number[], gradient?: Float64Array): number =>
    parameters.reduce(
      (sum, parameter, k) => {
        if (gradient !== undefined) gradient[k] += 2 * HOLD[k] * (parameter - PRESENT[k]);
        return sum + HOLD[k] * (parameter - PRESENT[k]) ** 2;
      },
      loss(parameters, indexes, gradient),
    );
  let parameters = [...PRESENT];
  const gradient = new Float64Array(PRESENT.length);
  let current = value(parameters, gradient);
  let step = 1e-3;
  for (let round = 0; round < ROUNDS; round++) {
    const next = parameters.map((parameter, k) => Math.max(parameter - step * gradient[k], k < 2 ? 0.05 : 0));
    const nextGradient = new Float64Array(PRESENT.length);
    const reached = value(next, nextGradient);
    if (reached > current) {
      step /= 3;
      if (step < 1e-9) break;
      continue;
    }
    parameters = next;
    current = reached;
    gradient.set(nextGradient);
    step *= 1.5;
  }
  return parameters;
}
