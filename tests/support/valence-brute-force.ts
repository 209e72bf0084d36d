import type { ValenceGroup } from '../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';

/** An atom with its valence, before any bond. */
interface State {
  readonly z: number;
  readonly charge: number;
  readonly valence: number;
  readonly hydrogens: number;
}

/** Valence and charge of each element in and out of the groups; hydrogens stand on neutral atoms of default valence and on P 5. */
const STATES: Readonly<Record<string, ReadonlyArray<readonly [z: number, charge: number, valence: number, mostHydrogens: number]>>> = {
  C: [
    [6, 0, 4, 4],
    [6, -1, 3, 0],
  ],
  N: [
    [7, 0, 3, 3],
    [7, 1, 4, 0],
    [7, -1, 2, 0],
  ],
  O: [
    [8, 0, 2, 2],
    [8, -1, 1, 0],
  ],
  S: [
    [16, 0, 2, 2],
    [16, 0, 4, 0],
    [16, 0, 6, 0],
  ],
  P: [
    [15, 0, 3, 3],
    [15, 0, 5, 2],
  ],
  Cl: [[17, 0, 1, 1]],
};

/**
 * Every molecule of a formula with the given groups, by trying all bonds between labelled atoms; shares nothing with
 * the engine. Like atoms are kept in falling order of their rows under neighbouring exchanges, which leaves copies of the
 * same molecule: they are for the caller to tell apart.
 *
 * @param atoms - heavy atoms by element symbol.
 */
export function bruteForce(
  atoms: Readonly<Record<string, number>>,
  hydrogens: number,
  groups: ReadonlySet<ValenceGroup>,
  visit: (graph: MolecularGraph) => void,
): void {
  const symbols = Object.entries(atoms).flatMap(([symbol, count]) => Array<string>(count).fill(symbol));
  const chooseStates = (chosen: State[], options: State[][], left: number): void => {
    const k = chosen.length;
    if (k === symbols.length) {
      const charge = chosen.reduce((sum, state) => sum + state.charge, 0);
      const open = chosen.reduce((sum, state) => sum + state.valence - state.hydrogens, 0);
      if (left === 0 && charge === 0 && open % 2 === 0 && open >= 2 * (k - 1)) placeBonds(chosen, groups, visit);
      return;
    }
    // States of like elements in falling order of the option list: each choice once.
    const all = options[k];
    const from = k > 0 && symbols[k - 1] === symbols[k] ? all.findIndex((state) => isSame(state, chosen[k - 1])) : 0;
    for (const state of all.slice(from)) if (state.hydrogens <= left) chooseStates([...chosen, state], options, left - state.hydrogens);
  };
  const options = symbols.map((symbol) =>
    STATES[symbol].flatMap(([z, charge, valence, most]) =>
      Array.from({ length: most + 1 }, (_, hydrogens): State => ({ z, charge, valence, hydrogens })),
    ),
  );
  chooseStates([], options, hydrogens);
}

const isSame = (a: State, b: State): boolean =>
  a.z === b.z && a.charge === b.charge && a.valence === b.valence && a.hydrogens === b.hydrogens;

function placeBonds(states: readonly State[], groups: ReadonlySet<ValenceGroup>, visit: (graph: MolecularGraph) => void): void {
  const n = states.length;
  const bonds = new Uint8Array(n * n);
  const free = states.map(({ valence, hydrogens }) => valence - hydrogens);
  /** Is the row of i at least that of the like atom before it, both without the columns of the two? */
  const isOrdered = (i: number): boolean => {
    if (i === 0 || !isSame(states[i], states[i - 1])) return true;
    for (let j = 0; j < n; j++) {
      if (j === i || j === i - 1) continue;
      const difference = bonds[(i - 1) * n + j] - bonds[i * n + j];
      if (difference !== 0) return difference > 0;
    }
    return true;
  };
  const place = (i: number, j: number): void => {
    if (i === n - 1) {
      if (free[i] === 0 && states.every((_, k) => isOrdered(k)) && isConnected(n, bonds)) {
        const graph = {
          atomCount: n,
          atomicNumbers: Uint8Array.from(states, ({ z }) => z),
          hydrogens: Uint8Array.from(states, (state) => state.hydrogens),
          charges: Int8Array.from(states, ({ charge }) => charge),
          bondOrders: bonds,
        };
        if (hasOnlyGroups(graph, groups)) visit(graph);
      }
      return;
    }
    if (j === n) {
      if (free[i] === 0) place(i + 1, i + 2);
      return;
    }
    for (let order = Math.min(3, free[i], free[j]); order >= 0; order--) {
      const charges = states[i].charge * states[j].charge;
      // Atoms of negative charge are bonded to one positive one and to nothing else.
      if (order > 0 && (states[i].charge < 0 || states[j].charge < 0) && charges >= 0) continue;
      bonds[i * n + j] = bonds[j * n + i] = order;
      free[i] -= order;
      free[j] -= order;
      place(i, j + 1);
      free[i] += order;
      free[j] += order;
      bonds[i * n + j] = bonds[j * n + i] = 0;
    }
  };
  if (n === 1) {
    if (free[0] === 0) place(0, 1);
    return;
  }
  place(0, 1);
}

function isConnected(n: number, bonds: Uint8Array): boolean {
  const reached = [0];
  for (let head = 0; head < reached.length; head++)
    for (let j = 0; j < n; j++) if (bonds[reached[head] * n + j] > 0 && !reached.includes(j)) reached.push(j);
  return reached.length === n;
}

const DEFAULT_VALENCE: Readonly<Record<number, number>> = { 6: 4, 7: 3, 8: 2, 15: 3, 16: 2, 17: 1 };

/**
 * The group that an atom belongs to, by its neighbours as a chemist names them: `plain` in its default valence, null in
 * any other state.
 */
export function groupOfAtom(graph: MolecularGraph, a: number): ValenceGroup | 'plain' | null {
  const { atomCount: n, bondOrders, charges, atomicNumbers, hydrogens } = graph;
  const bonded = Array.from({ length: n }, (_, b) => b).filter((b) => bondOrders[a * n + b] > 0);
  if (charges[a] < 0) {
    const [centre, ...others] = bonded;
    return others.length > 0 || charges[centre] !== 1 ? null : groupOfAtom(graph, centre);
  }
  const oxides = bonded.filter((b) => atomicNumbers[b] === 8 && charges[b] === 0 && bondOrders[a * n + b] === 2).length;
  const doubles = bonded.filter((b) => bondOrders[a * n + b] === 2).length;
  const valence = bonded.reduce((sum, b) => sum + bondOrders[a * n + b], hydrogens[a]);
  if (charges[a] > 0) {
    const minus = bonded.filter((b) => charges[b] < 0);
    if (atomicNumbers[a] !== 7 || valence !== 4 || hydrogens[a] > 0 || minus.length !== 1) return null;
    const order = bondOrders[a * n + minus[0]];
    const others = bonded.filter((b) => b !== minus[0]);
    if (atomicNumbers[minus[0]] === 8) return order !== 1 ? null : oxides > 0 ? 'nitro' : 'nOxide';
    if (atomicNumbers[minus[0]] === 6) return order === 3 ? 'isocyanide' : null;
    if (atomicNumbers[minus[0]] !== 7 || order !== 2 || others.length !== 1 || charges[others[0]] !== 0) return null;
    return atomicNumbers[others[0]] === 6 ? 'diazo' : atomicNumbers[others[0]] === 7 ? 'azide' : null;
  }
  if (valence === DEFAULT_VALENCE[atomicNumbers[a]]) return 'plain';
  const hasTriple = bonded.some((b) => bondOrders[a * n + b] === 3);
  const hasSinglesBeside = bonded.length > doubles && oxides === doubles && !hasTriple;
  if (atomicNumbers[a] === 16 && hydrogens[a] === 0 && hasSinglesBeside) {
    if (valence === 4 && bonded.length === 3) return 'sulfoxide';
    return valence === 6 && bonded.length === 4 ? 'sulfone' : null;
  }
  return atomicNumbers[a] === 15 && valence === 5 && doubles === 1 && hasSinglesBeside ? 'phosphorusOxide' : null;
}

function hasOnlyGroups(graph: MolecularGraph, groups: ReadonlySet<ValenceGroup>): boolean {
  for (let a = 0; a < graph.atomCount; a++) {
    const group = groupOfAtom(graph, a);
    if (group === null || (group !== 'plain' && !groups.has(group))) return false;
  }
  return true;
}
