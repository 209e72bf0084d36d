/*
 * Fits the ranges of 13C shifts by kind of carbon on the open NMR data, writes shared/chemistry/shift-window-table.ts and
 * says what the windows wrongly exclude: npm run bench -- fit-shift-windows [--dry] [--table] [--failures]
 *
 * Fold 0 is never used for the fit; it is measured afterwards. Signals that are assigned count as they are; those of complete
 * lists without assignment are laid on the predicted shifts in order, within each number of attached hydrogens.
 */
import { writeFileSync } from 'node:fs';
import { resolve } from 'node:path';
import { format } from 'prettier';
import { elementOf } from '../../shared/chemistry/elements.js';
import { compositionOf } from '../../shared/chemistry/smiles.js';
import {
  deriveWindow,
  NEIGHBOUR_KINDS,
  neighbourKindOf,
  neighboursName,
  type NeighbourKind,
} from '../../shared/chemistry/shift-windows.js';
import type { ShiftRange } from '../../shared/chemistry/shift-window-table.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { analyseStructure, AnalysisScratch } from '../../workers/graph/analysis.js';
import { createShiftPredictor } from '../../workers/prediction/create-shift-predictor.js';
import { createPredictedShifts } from '../../workers/prediction/predicted-shifts.js';
import { readNmrData, type NmrRecord } from '../support/nmr-data.js';
import { matchCarbons } from '../support/prediction-errors.js';
import { matchWindows } from '../support/window-matcher.js';

/** Share of the observed shifts left outside at each end: typing errors and wrong structures. */
const TAIL = 0.0003;
/** Margin in ppm: a part for everyone, and one for what few compounds do not show. */
const MARGIN = 3;
const FEW_MARGIN = 20;
/** As many of a kind are left outside, too, as make up this share of all carbons with these hydrogens that lie as far out. */
const SHARE = 0.00005;
/** ppm without any carbon that part two groups of one kind. */
const GAP = 8;
/** Kinds and groups seen less often are left out. */
const LEAST = 5;
const BONDS = ['single', 'double', 'triple', 'cumulated'] as const;
const NEIGHBOURS = [
  '',
  ...NEIGHBOUR_KINDS,
  ...NEIGHBOUR_KINDS.flatMap((first, k) => NEIGHBOUR_KINDS.slice(k).map((second) => neighboursName([first, second]))),
  '3',
];

interface Kind {
  readonly hydrogens: number;
  readonly bonds: ShiftRange['bonds'];
  readonly neighbours: string;
}

/** Bond pattern and heteroatoms of a carbon; independent of the Kekulé form. */
function kindOf(graph: MolecularGraph, atom: number): Kind {
  const n = graph.atomCount;
  let piBonds = 0;
  let highest = 1;
  const kinds: NeighbourKind[] = [];
  for (let other = 0; other < n; other++) {
    const order = graph.bondOrders[atom * n + other];
    if (order === 0) continue;
    piBonds += order - 1;
    highest = Math.max(highest, order);
    const kind = neighbourKindOf(elementOf(graph.atomicNumbers[other]).symbol);
    if (kind !== null) kinds.push(kind);
  }
  return {
    hydrogens: graph.hydrogens[atom],
    bonds: piBonds === 0 ? 'single' : piBonds === 1 ? 'double' : highest === 3 ? 'triple' : 'cumulated',
    neighbours: neighboursName(kinds),
  };
}

const predictor = createShiftPredictor();
const scratch = new AnalysisScratch();
const predicted = createPredictedShifts();

/** Observed carbons of a compound: each atom with its shift. */
function observedCarbons(record: NmrRecord): { atom: number; shift: number }[] {
  const { graph } = record;
  const isSound = (atom: number, hydrogens: number | null): boolean =>
    graph.atomicNumbers[atom] === 6 && graph.charges[atom] === 0 && (hydrogens === null || graph.hydrogens[atom] === hydrogens);
  const assigned = (record.carbons ?? []).flatMap(({ atoms, shift, hydrogens }) =>
    atoms === null || atoms.length === 0 || !isSound(atoms[0], hydrogens) ? [] : [{ atom: atoms[0], shift }],
  );
  const known = new Set((record.carbons ?? []).flatMap(({ atoms }) => atoms ?? []));
  if (record.carbonAssignment === 'molfile') return assigned;
  predictor.predictInto(graph, analyseStructure(graph, scratch), predicted);
  const matched = matchCarbons(record, predicted.carbonShift, predicted.carbonSd) ?? [];
  return [
    ...assigned,
    ...matched.flatMap(({ atoms, observed }) =>
      known.has(atoms[0]) || !isSound(atoms[0], null) ? [] : [{ atom: atoms[0], shift: observed }],
    ),
  ];
}

/** Rising shifts in groups: allene centres and cumulenes, say, or a few typing errors far from all others. */
function splitAtGaps(shifts: readonly number[]): number[][] {
  const groups: number[][] = [];
  shifts.forEach((shift, k) => {
    if (k === 0 || shift - shifts[k - 1] > GAP) groups.push([]);
    groups[groups.length - 1].push(shift);
  });
  return groups;
}

/**
 * How many shifts of a group count as errors at its lower and upper end: a share of the group, or as many as are hardly
 * anything beside all carbons with these hydrogens that lie as far out.
 *
 * @param group, all - rising.
 */
function trimmed(group: readonly number[], all: readonly number[]): [below: number, above: number] {
  let below = Math.floor(TAIL * group.length);
  let above = below;
  const last = group.length - 1;
  while (below < last >> 1 && below + 1 <= SHARE * countBelow(all, group[below + 1])) below++;
  while (above < last >> 1 && above + 1 <= SHARE * (all.length - countBelow(all, group[last - 1 - above]))) above++;
  return [below, above];
}

/** Entries of a rising list that are smaller. */
function countBelow(list: readonly number[], value: number): number {
  let low = 0;
  let high = list.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (list[middle] < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

interface FittedRange extends ShiftRange {
  readonly seen: number;
}

function fitRanges(records: readonly NmrRecord[]): FittedRange[] {
  const samples = new Map<string, number[]>();
  for (const record of records) {
    for (const { atom, shift } of carbonsOf(record)) {
      const { hydrogens, bonds, neighbours } = kindOf(record.graph, atom);
      const key = `${hydrogens} ${bonds} ${neighbours}`;
      const list = samples.get(key);
      if (list === undefined) samples.set(key, [shift]);
      else list.push(shift);
    }
  }
  const ranges: FittedRange[] = [];
  for (const hydrogens of [0, 1, 2, 3]) {
    const all = [...samples].flatMap(([key, shifts]) => (key.startsWith(`${hydrogens} `) ? shifts : [])).sort((a, b) => a - b);
    for (const bonds of BONDS) {
      // A double bond joins one neighbour, a triple bond or two double bonds take two valences more than neighbours.
      const most = 4 - hydrogens - { single: 0, double: 1, triple: 2, cumulated: 2 }[bonds];
      if (most < 1 || (bonds === 'cumulated' && most < 2)) continue;
      for (const neighbours of NEIGHBOURS) {
        if ((neighbours === '3' ? 3 : neighbours.length) > most) continue;
        const shifts = samples.get(`${hydrogens} ${bonds} ${neighbours}`)?.sort((a, b) => a - b);
        if (shifts === undefined || shifts.length < LEAST) continue;
        for (const group of splitAtGaps(shifts)) {
          if (group.length < Math.max(LEAST, TAIL * shifts.length)) continue;
          const [below, above] = trimmed(group, all);
          const margin = MARGIN + FEW_MARGIN / Math.sqrt(group.length);
          const low = Math.max(-50, Math.floor(group[below] - margin));
          const high = Math.min(300, Math.ceil(group[group.length - 1 - above] + margin));
          ranges.push({ hydrogens, bonds, neighbours, low, high, seen: group.length });
        }
      }
    }
  }
  return ranges;
}

/** What derived windows do to true structures. */
function measure(records: readonly NmrRecord[], ranges: readonly ShiftRange[]): void {
  let structures = 0;
  let excluded = 0;
  let signals = 0;
  let settled = 0;
  let bounded = 0;
  for (const { graph, carbons, carbonsComplete, id, smiles } of records) {
    if (carbons === null || carbonsComplete !== true || carbons.some(({ hydrogens }) => hydrogens === null)) continue;
    if (graph.charges.some((charge, atom) => charge !== 0 && graph.atomicNumbers[atom] === 6)) continue;
    const counts = compositionOf(graph);
    const windows = carbons.map(({ shift, hydrogens }) => deriveWindow(shift, hydrogens!, counts, ranges));
    structures++;
    signals += windows.length;
    settled += windows.filter(({ hybridisations }) => hybridisations.length === 1).length;
    bounded += windows.filter(({ heteroNeighbours: { min, max } }) => min > 0 || max === 0).length;
    const isKept = matchWindows(
      graph,
      carbons.map(({ hydrogens }, i) => ({ hydrogens: hydrogens!, count: 1, window: windows[i] })),
      true,
    );
    if (isKept) continue;
    excluded++;
    if (process.argv.includes('--failures'))
      console.log(`  ${id} ${smiles} ${carbons.map(({ shift, hydrogens }) => `${shift}/${hydrogens}`).join(' ')}`);
  }
  const percent = (part: number, whole: number): string => `${((100 * part) / whole).toFixed(2)} %`;
  console.log(
    `  true structures excluded: ${excluded} of ${structures} (${percent(excluded, structures)}); hybridisation settled for ${percent(settled, signals)} of the signals, heteroatoms shown or ruled out for ${percent(bounded, signals)}`,
  );
}

const records = readNmrData('train.jsonl.gz');
if (records === null) throw new Error('The open NMR data are not beside this checkout.');
const observed = records.filter(({ carbons }) => carbons !== null);
const cache = new Map<NmrRecord, { atom: number; shift: number }[]>();
function carbonsOf(record: NmrRecord): { atom: number; shift: number }[] {
  let list = cache.get(record);
  if (list === undefined) cache.set(record, (list = observedCarbons(record)));
  return list;
}
console.log('fitted on folds 2 to 9, measured on fold 1:');
measure(
  observed.filter(({ fold }) => fold === 1),
  fitRanges(observed.filter(({ fold }) => fold > 1)),
);
const fitting = observed.filter(({ fold }) => fold !== 0);
const ranges = fitRanges(fitting);
if (process.argv.includes('--table')) {
  for (const { hydrogens, bonds, neighbours, low, high, seen } of ranges)
    console.log(`CH${hydrogens} ${bonds.padEnd(9)} ${(neighbours || '-').padEnd(3)} ${low} to ${high} ppm, ${seen} carbons`);
}
console.log('fitted on folds 1 to 9, measured on fold 0:');
measure(
  observed.filter(({ fold }) => fold === 0),
  ranges,
);
if (!process.argv.includes('--dry')) {
  const seen = ranges.reduce((sum, range) => sum + range.seen, 0);
  const text = `/** Shifts at which carbons of one kind are found, ppm. */
export interface ShiftRange {
  /** Attached. */
  readonly hydrogens: number;
  /** single: no multiple bond; double: one; cumulated: two. */
  readonly bonds: 'single' | 'double' | 'triple' | 'cumulated';
  /** Bonded heteroatoms, one letter each: see neighbourKindOf; '3' = three or more. */
  readonly neighbours: string;
  readonly low: number;
  readonly high: number;
}

/**
 * Fitted by tests/bench/fit-shift-windows.ts on nmrshiftdb2 in ${new Date().toISOString().slice(0, 7)} (fold 0 left out): ${seen} carbons of
 * ${fitting.length} compounds. Each range spans all but ${Math.round(TAIL * 1e5)} in 100 000 of the shifts at either end, or as many as make up ${Math.round(SHARE * 1e5)} in 100 000 of
 * all carbons with these hydrogens that lie as far out, widened by ${MARGIN} ppm and by
 * ${FEW_MARGIN} ppm over the square root of the number of carbons seen (the last column). Shifts of one kind
 * that lie more than ${GAP} ppm apart have ranges of their own; what was seen less than ${LEAST} times is left out.
 */
export const SHIFT_RANGES: readonly ShiftRange[] = (
  [
${ranges.map(({ hydrogens, bonds, neighbours, low, high, seen }) => `    [${hydrogens}, '${bonds}', '${neighbours}', ${low}, ${high}, ${seen}],`).join('\n')}
  ] as const
).map(([hydrogens, bonds, neighbours, low, high]) => ({ hydrogens, bonds, neighbours, low, high }));
`;
  const file = resolve(import.meta.dirname, '../../shared/chemistry/shift-window-table.ts');
  writeFileSync(file, await format(text, { parser: 'typescript', singleQuote: true, printWidth: 140 }));
}
