/*
 * How often the interval of an estimate holds the truth: `npm run bench -- estimate [PROBES]`.
 *
 * Known counts: independent ones beside the checkout (oracles/), plain formulas and formulas with fragments. Probing alone
 * with several seeds, without the counting that the product does first; then the product's estimate with its clock.
 */
import { evidenceDocument, type EvidenceInput } from '../../shared/schemas/evidence.js';
import { estimateSearch } from '../../workers/enumeration/estimate.js';
import { createSearch } from '../../workers/enumeration/search.js';
import { estimateRun } from '../../workers/jobs/estimate.js';
import { readOutside } from '../support/outside.js';

const PROBLEMS = 30;
const SEEDS = [1, 2, 3, 4, 5];
const probes = Number(process.argv[2] ?? 500);

interface Problem {
  readonly name: string;
  readonly input: EvidenceInput;
  readonly count: number;
}
const plain = readOutside<{ formula: string; multigraphCount: number }[]>('oracles/isomer-counts.json');
const withFragments =
  readOutside<{ formula: string; required: { fragment: string; count: number }[]; count: number }[]>('oracles/fragment-counts.json');
if (plain === null || withFragments === null) process.exit(0);
const options = { plausibility: false };
const formulas = plain
  .filter(({ multigraphCount }) => multigraphCount >= 1_000)
  .map(({ formula, multigraphCount }): Problem => ({
    name: formula,
    input: { formula, options: { ...options, mergeResonanceForms: false } },
    count: multigraphCount,
  }));
const fragments = withFragments
  .filter(({ count }) => count >= 100)
  .map(({ formula, required, count }): Problem => ({
    name: `${formula} with ${required.map(({ fragment, count: copies }) => `${copies} ${fragment}`).join(', ')}`,
    input: {
      formula,
      fragments: { required: required.map(({ fragment: smiles, count: copies }) => ({ smiles, count: copies })) },
      options,
    },
    count,
  }));
/** Evenly spread over a list, its ends included. */
const spread = <T>(list: readonly T[], wanted: number): T[] =>
  list.length <= wanted ? [...list] : Array.from({ length: wanted }, (_, k) => list[Math.round((k * (list.length - 1)) / (wanted - 1))]);
const problems = [...spread(fragments, 8), ...spread(formulas, PROBLEMS - Math.min(8, fragments.length))].sort((a, b) => a.count - b.count);

const holds = ({ low, high }: { low: number; high: number }, count: number): boolean => low <= count && count <= high;
let held = 0;
let tried = 0;
let heldByProduct = 0;
let exact = 0;
let slowest = 0;
console.log(
  `problem                                                 count   estimate / count, ${probes} probes (! = outside the interval)   product`,
);
for (const { name, input, count } of problems) {
  const evidence = evidenceDocument.parse(input);
  const search = createSearch(evidence);
  const ratios = SEEDS.map((seed) => {
    const estimate = estimateSearch(search, { seed, maxProbes: probes, shouldStop: () => false, observe: () => null });
    tried++;
    const isHeld = holds(estimate, count);
    if (isHeld) held++;
    return `${(estimate.estimate / count).toFixed(2)}${isHeld ? ' ' : '!'}`;
  });
  const product = estimateRun({ evidence, mode: 'count', probes: 1e6, seed: 1, maxSeconds: 1.5 });
  if (holds(product, count)) heldByProduct++;
  if (product.isExact) exact++;
  slowest = Math.max(slowest, product.seconds);
  const remark = product.isExact ? 'counted' : `${(product.estimate / count).toFixed(2)}${holds(product, count) ? '' : ' OUTSIDE'}`;
  console.log(`${name.slice(0, 50).padEnd(51)} ${String(count).padStart(9)}   ${ratios.join(' ').padEnd(40)} ${remark}`);
}
const percent = (part: number, whole: number): string => `${((100 * part) / whole).toFixed(0)} %`;
console.log(`\ninside the 95 % interval: probing alone ${held} of ${tried} (${percent(held, tried)}, wanted 90 %)`);
console.log(
  `as the product estimates: ${heldByProduct} of ${problems.length}, ${exact} of them counted; slowest ${slowest.toFixed(2)} s (wanted 2 s)`,
);
