import type { CarbonSignal, EvidenceDocument, ProtonSignal } from '../../shared/schemas/evidence.js';
import type { MolecularGraph } from '../../shared/types/molecular-graph.js';
import { analyseStructure } from '../../workers/graph/analysis.js';
import { Environments } from '../../workers/ranking/environments.js';
import { SignalBounds } from '../../workers/ranking/signal-bounds.js';

/** Bonds between every two heavy atoms (Floyd 1962, Warshall 1962). */
export function distancesOf({ atomCount: n, bondOrders }: MolecularGraph): number[][] {
  const start = (a: number, b: number): number => (a === b ? 0 : bondOrders[a * n + b] > 0 ? 1 : 99);
  const d = Array.from({ length: n }, (_, a) => Array.from({ length: n }, (__, b) => start(a, b)));
  for (let k = 0; k < n; k++) for (let a = 0; a < n; a++) for (let b = 0; b < n; b++) d[a][b] = Math.min(d[a][b], d[a][k] + d[k][b]);
  return d;
}

/** Classes of like atoms and the signals that each can show at most: definitions that other tests hold to the outside. */
export function classesOf(graph: MolecularGraph): {
  classOf: number[];
  members: number[][];
  carbonSignals: number[];
  protonSignals: number[];
} {
  const structure = analyseStructure(graph);
  const environments = new Environments();
  const count = environments.find(structure);
  const bounds = new SignalBounds();
  bounds.find(structure, environments);
  const classOf = [...environments.classOf.subarray(0, graph.atomCount)];
  return {
    classOf,
    members: Array.from({ length: count }, (_, c) => classOf.flatMap((of, atom) => (of === c ? [atom] : []))),
    carbonSignals: [...bounds.carbonSignals.subarray(0, count)],
    protonSignals: [...bounds.protonSignals.subarray(0, count)],
  };
}

/** Spectra that a structure would show: one signal a class, far apart, and every pair within the usual limits. */
export function correlationEvidenceOf(
  graph: MolecularGraph,
  { withCounts = true }: { withCounts?: boolean } = {},
): {
  carbonSignals: CarbonSignal[];
  protonSignals: ProtonSignal[];
  correlations: { hsqc: [number, number][]; hmbc: [number, number][]; cosy: [number, number][] };
} {
  const { members } = classesOf(graph);
  const d = distancesOf(graph);
  const { atomicNumbers, hydrogens } = graph;
  const carbonShift = (c: number): number => 10 + 5 * c;
  const protonShift = (c: number): number => Number((0.5 + 0.3 * c).toFixed(2));
  const isCarbon = members.map(([atom]) => atomicNumbers[atom] === 6);
  const h = members.map(([atom]) => hydrogens[atom]);
  const within = (a: number, b: number, most: number): boolean =>
    members[a].some((x) => members[b].some((y) => x !== y && d[x][y] <= most));
  const all = members.map((_, c) => c);
  const protons = all.filter((c) => h[c] > 0);
  const carbons = all.filter((c) => isCarbon[c]);
  return {
    carbonSignals: carbons.map((c) => ({
      shift: carbonShift(c),
      hydrogens: Math.min(3, h[c]),
      ...(withCounts ? { count: members[c].length } : {}),
    })),
    protonSignals: protons.map((c) => ({
      shift: protonShift(c),
      count: members[c].length * h[c],
      ...(isCarbon[c] ? {} : { exchangeable: true }),
    })),
    correlations: {
      hsqc: carbons.filter((c) => h[c] > 0).map((c) => [carbonShift(c), protonShift(c)]),
      hmbc: protons.flatMap((p) => carbons.filter((c) => within(p, c, 2)).map((c): [number, number] => [protonShift(p), carbonShift(c)])),
      cosy: protons.flatMap((p) =>
        protons.filter((q) => q > p && within(p, q, 1)).map((q): [number, number] => [protonShift(p), protonShift(q)]),
      ),
    },
  };
}

interface Site {
  carbon: number | null;
  proton: number | null;
}

/** Assignments that {@link meetsCorrelations} would give up before. */
const MOST_ASSIGNMENTS = 3000;

/**
 * Can the signals be laid on the atoms so that at most the allowed pairs go unmet? By trying every assignment, without
 * any of the shortcuts of the search; written from the statement of the rules. For few atoms only.
 *
 * @returns null when there are too many assignments to try.
 */
export function meetsCorrelations(graph: MolecularGraph, evidence: EvidenceDocument): boolean | null {
  const { carbonSignals, protonSignals, correlations } = evidence;
  const { atomCount: n, atomicNumbers, hydrogens } = graph;
  const atoms = Array.from({ length: n }, (_, a) => a);
  const d = distancesOf(graph);
  const { classOf, members, carbonSignals: carbonRoom, protonSignals: protonRoom } = classesOf(graph);
  const onCarbon = (shift: number): number[] => carbonSignals.flatMap((s, i) => (Math.abs(s.shift - shift) < 0.6001 ? [i] : []));
  const onProton = (shift: number): number[] => protonSignals.flatMap((s, i) => (Math.abs(s.shift - shift) < 0.06001 ? [i] : []));

  // HSQC: a proton sits on the carbons of its pairs; without a pair that means it more than any other, perhaps elsewhere.
  const sure = protonSignals.map(() => new Set<number>());
  const possible = protonSignals.map(() => new Set<number>());
  const protonated = new Set<number>();
  for (const [c, p] of correlations.hsqc) {
    const carbons = onCarbon(c);
    const protons = onProton(p);
    if (carbons.length === 1 && protons.length > 0) protonated.add(carbons[0]);
    const gaps = protons.map((i) => Math.abs(protonSignals[i].shift - p));
    const least = Math.min(...gaps);
    const nearest = protons.filter((_, k) => gaps[k] < least + 1e-9);
    for (const i of protons) for (const carbon of carbons) (nearest.length === 1 && nearest[0] === i ? sure : possible)[i].add(carbon);
  }
  const tied = carbonSignals.map((_, i) => sure.filter((set) => set.size === 1 && set.has(i)).length);
  const hydrogenRange = carbonSignals.map(({ hydrogens: known, count }, i): [number, number] => {
    if (known !== undefined) return [known, known];
    if (tied[i] > 1 && count === 1) return [2, 2];
    return [protonated.has(i) ? 1 : 0, 3];
  });
  const sitesOf = (proton: number): Site[] => {
    const list: Site[] = [...new Set([...sure[proton], ...possible[proton]])].map((carbon) => ({ carbon, proton: null }));
    return sure[proton].size > 0 ? list : [...list, { carbon: null, proton }];
  };

  interface Demand {
    kind: 'hmbc' | 'cosy';
    ends: [Site, Site][];
  }
  const demands: Demand[] = [];
  const seen = new Set<string>();
  const demand = (kind: 'hmbc' | 'cosy', signals: [number, number][], ends: [Site, Site][]): void => {
    const key =
      kind +
      signals
        .map((pair) => String(kind === 'cosy' ? [...pair].sort() : pair))
        .sort()
        .join(';');
    if (signals.length === 0 || seen.has(key)) return;
    seen.add(key);
    demands.push({ kind, ends });
  };
  for (const [p, c] of correlations.hmbc) {
    const signals = onProton(p).flatMap((i) => onCarbon(c).map((j): [number, number] => [i, j]));
    const ends = signals.flatMap(([i, j]) => sitesOf(i).map((site): [Site, Site] => [site, { carbon: j, proton: null }]));
    demand('hmbc', signals, ends);
  }
  for (const [p, q] of correlations.cosy) {
    const signals = onProton(p).flatMap((i) => onProton(q).flatMap((j): [number, number][] => (i === j ? [] : [[i, j]])));
    const ends = signals.flatMap(([i, j]) => sitesOf(i).flatMap((a) => sitesOf(j).map((b): [Site, Site] => [a, b])));
    demand('cosy', signals, ends);
  }
  const nameOf = ({ carbon, proton }: Site): string => (carbon !== null ? `C${carbon}` : `H${proton}`);
  const sites = new Map(demands.flatMap(({ ends }) => ends.flat().map((site) => [nameOf(site), site])));
  const names = [...sites.keys()];

  // A signal without a count stands for all its equivalents, unless the signals use up the carbons.
  const carbonCount = (h: number | null): number =>
    atoms.filter((a) => atomicNumbers[a] === 6 && (h === null || Math.min(3, hydrogens[a]) === h)).length;
  const under = (h: number | null): number =>
    carbonSignals.reduce(
      (sum, { count }, i) => sum + (h === null || (hydrogenRange[i][0] === h && hydrogenRange[i][1] === h) ? (count ?? 1) : 0),
      0,
    );
  const isTyped = hydrogenRange.every(([least, most]) => least === most);
  const isClosed = (carbon: number): boolean =>
    carbonSignals[carbon].count !== undefined ||
    under(null) >= carbonCount(null) ||
    (isTyped && under(hydrogenRange[carbon][0]) >= carbonCount(hydrogenRange[carbon][0]));

  const placesOf = ({ carbon, proton }: Site): number[] =>
    atoms.filter((a) => {
      const isOnCarbon = atomicNumbers[a] === 6;
      if (carbon !== null) {
        const h = Math.min(3, hydrogens[a]);
        return isOnCarbon && h >= hydrogenRange[carbon][0] && h <= hydrogenRange[carbon][1];
      }
      const { count, exchangeable } = protonSignals[proton!];
      if (hydrogens[a] === 0 || (hydrogens[a] >= 3 && count !== undefined && count < 3)) return false;
      return exchangeable === undefined || exchangeable !== isOnCarbon;
    });
  const subsets = (list: number[], least: number, most: number): number[][] => {
    let all: number[][] = [[]];
    for (const atom of list) all = [...all, ...all.filter((set) => set.length < most).map((set) => [...set, atom])];
    return all.filter((set) => set.length >= least);
  };

  const laid = new Map<string, number[]>();
  const isAllowed = (): boolean => {
    const groups = members.map(() => ({ carbons: 0, protons: 0 }));
    for (const name of names) {
      const { carbon } = sites.get(name)!;
      for (const c of new Set(laid.get(name)!.map((atom) => classOf[atom]))) {
        if (carbon !== null) groups[c].carbons++;
        groups[c].protons += carbon === null ? 1 : (carbonSignals[carbon].count ?? 1) === 1 ? tied[carbon] : 0;
      }
    }
    if (groups.some(({ carbons, protons }, c) => (carbons > 0 && carbons > carbonRoom[c]) || (protons > 0 && protons > protonRoom[c])))
      return false;
    const stands = (site: Site): number[] => {
      const chosen = laid.get(nameOf(site))!;
      return site.carbon !== null && isClosed(site.carbon) ? chosen : chosen.flatMap((atom) => members[classOf[atom]]);
    };
    const isMet = ({ kind, ends }: Demand): boolean =>
      ends.some(([first, second]) =>
        stands(first).some((a) =>
          stands(second).some((b) => {
            if (hydrogens[a] === 0) return false;
            // From H over its atom: one bond more; to the other H: two.
            if (kind === 'hmbc') return a !== b && d[a][b] + 1 <= correlations.hmbcBonds;
            if (a === b) return hydrogens[a] === 2 && protonRoom[classOf[a]] > 1;
            return hydrogens[b] > 0 && d[a][b] + 2 <= correlations.cosyBonds;
          }),
        ),
      );
    return demands.filter((one) => !isMet(one)).length <= correlations.exceptions;
  };
  const choices = names.map((name) => {
    const site = sites.get(name)!;
    if (site.carbon === null) {
      const uses = demands.filter(({ ends }) => ends.some((pair) => pair.some((end) => nameOf(end) === name))).length;
      return subsets(placesOf(site), 1, Math.max(1, Math.min(uses, protonSignals[site.proton!].count ?? 1)));
    }
    const size = carbonSignals[site.carbon].count ?? 1;
    return subsets(placesOf(site), size, size);
  });
  if (choices.reduce((product, list) => product * list.length, 1) > MOST_ASSIGNMENTS) return null;
  const taken = new Set<number>();
  const lay = (k: number): boolean => {
    if (k === names.length) return isAllowed();
    const isOnCarbon = sites.get(names[k])!.carbon !== null;
    return choices[k].some((set) => {
      if (isOnCarbon && set.some((atom) => taken.has(atom))) return false;
      laid.set(names[k], set);
      if (isOnCarbon) for (const atom of set) taken.add(atom);
      const found = lay(k + 1);
      if (isOnCarbon) for (const atom of set) taken.delete(atom);
      return found;
    });
  };
  return lay(0);
}
