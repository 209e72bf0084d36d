/** What ring perception needs to know of an atom of a drawn piece; open valences are single bonds. */
export interface SmallRingAtom {
  readonly atomicNumber: number;
  readonly charge: number;
  readonly neighbours: { atom: number; order: number }[];
}

const LONE_PAIR_DONORS = new Set([7, 8, 15, 16]);

/** Lists all cycles of five or six bonds of order 1 or 2, atoms in ring order. */
function listSmallRings(atoms: readonly SmallRingAtom[]): number[][] {
  const rings: number[][] = [];
  const path: number[] = [];
  const walk = (start: number): void => {
    const last = path[path.length - 1]!;
    for (const { atom: next, order } of atoms[last]!.neighbours) {
      if (order > 2) continue;
      if (next === start && path.length >= 5) {
        // Each ring is met once in each direction; keep the one that leaves through the smaller neighbour.
        if (path[1]! < last) rings.push(path.slice());
      } else if (next > start && path.length < 6 && !path.includes(next)) {
        path.push(next);
        walk(start);
        path.pop();
      }
    }
  };
  for (let start = 0; start < atoms.length; start++) {
    path.push(start);
    walk(start);
    path.pop();
  }
  return rings;
}

/**
 * Lists five- and six-membered rings that are aromatic as drawn: each atom gives one electron through a double bond
 * inside the ring or inside a neighbouring ring already found aromatic, or two through a lone pair (neutral N, O, P, S
 * with single bonds only); six electrons in all. Covers benzene, azines, azoles and their fused systems.
 *
 * Approximation: Hückel's rule ring by ring; rings with exocyclic double bonds (2-pyridone) count as not aromatic.
 *
 * @returns rings as atom lists in ring order, each once.
 */
export function listSmallAromaticRings(atoms: readonly SmallRingAtom[]): number[][] {
  const found: number[][] = [];
  const isAromaticRing = (ring: readonly number[]): boolean => {
    let electrons = 0;
    for (const index of ring) {
      const atom = atoms[index]!;
      const partner = atom.neighbours.find(({ order }) => order === 2)?.atom;
      if (partner === undefined) {
        if (!LONE_PAIR_DONORS.has(atom.atomicNumber) || atom.charge !== 0) return false;
        electrons += 2;
      } else {
        if (!ring.includes(partner) && !found.some((other) => other.includes(index) && other.includes(partner))) return false;
        electrons += 1;
      }
    }
    return electrons === 6;
  };
  let open = listSmallRings(atoms);
  for (let foundBefore = -1; foundBefore < found.length;) {
    foundBefore = found.length;
    open = open.filter((ring) => {
      if (!isAromaticRing(ring)) return true;
      found.push(ring);
      return false;
    });
  }
  return found;
}
