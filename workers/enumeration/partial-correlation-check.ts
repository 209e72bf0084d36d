import { findOpenSites, TYPE_COUNT, type CorrelationModel } from '../correlations/correlation-model.js';
import { areTwins, CorrelationMatcher, FAILED, setBit, WORDS } from '../correlations/correlation-matcher.js';
import { MAX_ATOMS } from '../graph/analysis.js';
import type { SearchLayout } from './distributions.js';
import { FILL_STRIDE } from './fill.js';
import type { PartialCheck } from './partial-checks.js';

const CARBON = 6;
const SILICON = 14;

/** Rows that must be complete: before, nearly every atom can still come near every other. */
const LEAST_ROWS = 2;
/** Places tried in one test; a test that takes longer costs more than it saves. */
const NODE_LIMIT = 300;

/**
 * COSY and HMBC pairs tested on a matrix that is still being filled. Complete atoms are joined by their bonds only; any two
 * atoms with free valence may still share one, which brings everything at least as near as in any completion. Where even
 * then no assignment of the signals leaves few enough pairs unmet, no completion has one.
 *
 * What is left to the test of the finished structure: symmetry (which atoms end up equivalent, how many signals they
 * show) and windows of shifts.
 */
export function createPartialCorrelationCheck(model: CorrelationModel, layout: SearchLayout): PartialCheck {
  const { base, open, tied, freeValence, unitOf } = layout;
  const { atomCount: n, atomicNumbers, hydrogens } = base;
  const matcher = new CorrelationMatcher(model);
  const { adjacency, alike, twinOf, places, isOpen, protonated, geminal } = matcher;
  const carbonsOfType = new Int32Array(TYPE_COUNT);
  /** Element and hydrogens of each atom as one number. */
  const kind = new Int32Array(MAX_ATOMS);
  const innerBonds = new Int32Array(MAX_ATOMS * WORDS);
  /** Open atoms with which each open atom may bond: those of other units. */
  const bondable = new Int32Array(MAX_ATOMS * WORDS);
  for (let a = 0; a < n; a++) {
    kind[a] = Math.imul(atomicNumbers[a] * 8 + hydrogens[a] + 1, 0x9e3779b1);
    if (atomicNumbers[a] === CARBON) carbonsOfType[Math.min(hydrogens[a], TYPE_COUNT - 1)]++;
    if (hydrogens[a] > 0) setBit(protonated, 0, a);
    if (hydrogens[a] === 2) setBit(geminal, 0, a);
    for (let b = 0; b < n; b++) if (base.bondOrders[a * n + b] > 0) setBit(innerBonds, a, b);
    if (a >= open) continue;
    for (let b = 0; b < open; b++) if (b !== a && unitOf[a] !== unitOf[b]) setBit(bondable, a, b);
  }
  findOpenSites(model, carbonsOfType, isOpen);
  const hasOpenSite = isOpen.includes(1);
  model.sites.forEach((site, k) => {
    for (let a = 0; a < n; a++) {
      const h = site.isCarbon ? Math.min(hydrogens[a], TYPE_COUNT - 1) : hydrogens[a];
      const isHetero = atomicNumbers[a] !== CARBON && atomicNumbers[a] !== SILICON;
      const isOfElement = site.isCarbon ? atomicNumbers[a] === CARBON : (site.exchangeable ?? isHetero) === isHetero;
      if (isOfElement && h >= site.leastHydrogens && h <= site.mostHydrogens) setBit(places, k, a);
    }
  });

  const left = new Uint8Array(MAX_ATOMS);
  const unfinished = new Int32Array(WORDS);
  /** Element, hydrogens and neighbours of each finished atom; 0 while a bond is missing. */
  const surroundings = new Int32Array(MAX_ATOMS);

  /** Bonds that are there or may come. */
  const findBonds = (filled: Uint8Array, known: number): void => {
    adjacency.set(innerBonds.subarray(0, n * WORDS));
    left.fill(0, 0, n);
    left.set(freeValence);
    const rows = known > tied ? known : tied;
    for (let i = 0; i < rows; i++) {
      const row = i * FILL_STRIDE;
      for (let j = i + 1; j < open; j++) {
        const order = filled[row + j];
        if (order === 0) continue;
        setBit(adjacency, i, j);
        setBit(adjacency, j, i);
        left[i] -= order;
        left[j] -= order;
      }
    }
  };
  const findAlike = (): void => {
    for (let a = 0; a < n; a++) {
      surroundings[a] = 0;
      if (left[a] > 0) continue;
      // A sum does not depend on the order of the neighbours; 1 keeps it apart from "unfinished" nearly always, and
      // where it does not, the atom only counts as like more others.
      let sum = 1;
      for (let w = 0; w < WORDS; w++) {
        for (let bits = adjacency[a * WORDS + w]; bits !== 0; bits &= bits - 1)
          sum = (sum + kind[32 * w + 31 - Math.clz32(bits & -bits)]) | 0;
      }
      surroundings[a] = sum;
    }
    for (let a = 0; a < n; a++) {
      alike[a * WORDS] = alike[a * WORDS + 1] = 0;
      for (let b = 0; b < n; b++) {
        const mayBeEqual = surroundings[a] === 0 || surroundings[b] === 0 || surroundings[a] === surroundings[b];
        if (mayBeEqual && kind[a] === kind[b]) setBit(alike, a, b);
      }
    }
  };
  const addPossibleBonds = (): void => {
    unfinished.fill(0);
    for (let a = 0; a < open; a++) if (left[a] > 0) setBit(unfinished, 0, a);
    for (let a = 0; a < open; a++) {
      if (left[a] === 0) continue;
      for (let w = 0; w < WORDS; w++) adjacency[a * WORDS + w] |= unfinished[w] & bondable[a * WORDS + w];
    }
  };
  /** Atoms of one kind with the same bonds, there or possible, change places freely. */
  const findTwins = (): void => {
    for (let a = 0; a < n; a++) {
      twinOf[a] = a;
      for (let b = 0; b < a; b++) {
        if (kind[a] !== kind[b] || left[a] > 0 !== left[b] > 0 || twinOf[b] !== b || !areTwins(adjacency, a, b)) continue;
        twinOf[a] = b;
        break;
      }
    }
  };

  return {
    reason: 'correlations',
    text: 'COSY and HMBC pairs already ask for more than the bonds made so far allow.',
    test(filled, known) {
      if (known < LEAST_ROWS) return true;
      findBonds(filled, known);
      if (hasOpenSite) findAlike();
      addPossibleBonds();
      findTwins();
      return matcher.match(n, model.exceptions, NODE_LIMIT) !== FAILED;
    },
  };
}
