/*
 * What 2D correlations save: `npm run bench -- correlations [seconds]`. For each problem the 13C and 1H signals of a
 * structure with all its COSY and HMBC pairs within three bonds: searched without the pairs, with the pairs tested on
 * finished structures only, and with the pairs tested while structures are built. A search is stopped after 60 s (or the given
 * time); its figures then stand with a +.
 */
import { evidenceDocument, type EvidenceDocument } from '../../shared/schemas/evidence.js';
import { createSearch, enumerateShard, planShards, type Search } from '../../workers/enumeration/search.js';
import { createEvaluator, type Evaluator } from '../../workers/ranking/evaluator.js';
import { correlationEvidenceOf } from '../support/correlation-evidence.js';
import { graphOf } from '../support/graph-of.js';

const limit = Number(process.argv[2] ?? 60);

interface Problem {
  readonly formula: string;
  readonly smiles: string;
  readonly fragments: readonly string[];
  readonly exceptions: number;
}
/** Structures of every kind. Their signals and pairs follow from the graph; nothing was measured. */
const PROBLEMS: readonly Problem[] = [
  { formula: 'C6H10O3', smiles: 'CCOC(=O)CC(C)=O', fragments: [], exceptions: 0 },
  { formula: 'C8H14O2', smiles: 'CC(=O)OC1CCCCC1', fragments: [], exceptions: 0 },
  { formula: 'C8H14O2', smiles: 'CC1CCC(C(C)=O)OC1', fragments: [], exceptions: 0 },
  { formula: 'C10H20O', smiles: 'CC1CCC(C(C)C)C(O)C1', fragments: [], exceptions: 0 },
  { formula: 'C10H20O', smiles: 'CC1CCC(C(C)C)C(O)C1', fragments: [], exceptions: 1 },
  { formula: 'C10H20O', smiles: 'CC1CCC(C(C)C)C(O)C1', fragments: [], exceptions: 2 },
  { formula: 'C10H14N2', smiles: 'CN1CCCC1c1cccnc1', fragments: [], exceptions: 0 },
  { formula: 'C11H14O3', smiles: 'COc1cc(CC(C)=O)ccc1OC', fragments: [], exceptions: 0 },
  { formula: 'C11H14O3', smiles: 'COc1cc(CC(C)=O)ccc1OC', fragments: [], exceptions: 2 },
  { formula: 'C15H24O2', smiles: 'CC1CCC2C(C)(C)C(=O)C3CC1(C2)CC3O', fragments: [], exceptions: 0 },
  { formula: 'C9H10O3', smiles: 'CC(=O)Oc1ccc(CO)cc1', fragments: ['*c1ccc(*)cc1'], exceptions: 0 },
  { formula: 'C10H13NO2', smiles: 'CC(=O)NCCc1ccc(O)cc1', fragments: ['*c1ccc(*)cc1'], exceptions: 0 },
];

function evidenceOf({ formula, smiles, fragments, exceptions }: Problem): EvidenceDocument {
  const spectra = correlationEvidenceOf(graphOf(smiles));
  return evidenceDocument.parse({
    formula,
    fragments: { required: fragments.map((fragment) => ({ smiles: fragment })) },
    ...spectra,
    correlations: { ...spectra.correlations, exceptions },
    options: { plausibility: false },
  });
}

/** Runs a search in this thread. */
function run(search: Search, evaluator: Evaluator): { built: number; kept: number; cut: number; seconds: number; complete: boolean } {
  let built = 0;
  let kept = 0;
  let cut = 0;
  const startedMs = performance.now();
  const isLate = (): boolean => performance.now() - startedMs > limit * 1000;
  const complete = planShards(search, 1).every((shard) =>
    enumerateShard(search, shard, {
      onCut: () => cut++,
      onConstitution(graph) {
        built++;
        if (evaluator.evaluate(graph).kind === 'scored') kept++;
      },
      onMultigraphs: () => undefined,
      shouldStop: isLate,
      stopRequested: () => built % 256 === 0 && isLate(),
    }),
  );
  return { built, kept, cut, seconds: (performance.now() - startedMs) / 1000, complete };
}

console.log(
  'problem (pairs, exceptions)                         without 2D: built        s   finished only: kept        s   in the fill: built     cuts     kept        s',
);
for (const problem of PROBLEMS) {
  const evidence = evidenceOf(problem);
  const { hsqc, hmbc, cosy } = evidence.correlations;
  const plain = evidenceDocument.parse({ ...evidence, correlations: { hsqc } });
  const settings = { keep: 1, maxSeconds: null, mode: 'list' } as const;
  const without = run(createSearch(plain), createEvaluator(plain, settings));
  const filtered = run(createSearch(plain), createEvaluator(evidence, settings));
  const inside = run(createSearch(evidence), createEvaluator(evidence, settings));
  const figure = (value: string, complete: boolean, width: number): string => `${value}${complete ? '' : '+'}`.padStart(width);
  const name = `${problem.formula} ${problem.smiles} (${hmbc.length + cosy.length}, ${problem.exceptions})`;
  console.log(
    name.padEnd(48),
    figure(String(without.built), without.complete, 22),
    figure(without.seconds.toFixed(2), without.complete, 8),
    figure(String(filtered.kept), filtered.complete, 21),
    figure(filtered.seconds.toFixed(2), filtered.complete, 8),
    figure(String(inside.built), inside.complete, 20),
    String(inside.cut).padStart(8),
    String(inside.kept).padStart(8),
    figure(inside.seconds.toFixed(3), inside.complete, 8),
    filtered.complete && filtered.kept !== inside.kept ? 'ANSWERS DIFFER' : '',
  );
}
