/*
 * Counts every reference formula and compares: `npm run bench -- counts [LARGEST]`.
 * Reference: independent counts made with nauty and RDKit, beside the checkout (oracles/). The merged counts of a few
 * hydrogen-poor formulas were made with an older RDKit whose aromaticity depends on the Kekulé form; the difference to
 * them is printed, not hidden.
 */
import { readOutside } from '../support/outside.js';
import { enumerateAll } from '../support/enumerate.js';

interface Row {
  formula: string;
  multigraphCount: number;
  aromaticMergedCount: number | null;
}

const rows = readOutside<Row[]>('oracles/isomer-counts.json');
if (rows === null) process.exit(0);
const largest = Number(process.argv[2] ?? Infinity);
let wrong = 0;
let seconds = 0;
for (const row of rows.filter(({ multigraphCount }) => multigraphCount <= largest).sort((a, b) => a.multigraphCount - b.multigraphCount)) {
  const startedMs = performance.now();
  const { multigraphs, constitutions } = enumerateAll({ formula: row.formula });
  const elapsed = (performance.now() - startedMs) / 1000;
  seconds += elapsed;
  if (multigraphs !== row.multigraphCount) wrong++;
  const merged = row.aromaticMergedCount;
  const remark =
    multigraphs !== row.multigraphCount
      ? 'WRONG'
      : merged !== null && merged !== constitutions
        ? `merged reference ${merged}, difference ${constitutions - merged}`
        : '';
  if (remark !== '' || elapsed > 1)
    console.log(
      row.formula.padEnd(12),
      String(multigraphs).padStart(10),
      String(constitutions).padStart(10),
      `${elapsed.toFixed(1)} s`,
      remark,
    );
}
console.log(`multigraph counts wrong: ${wrong}; ${seconds.toFixed(0)} s`);
process.exitCode = wrong === 0 ? 0 : 1;
