import { MAX_ATOMS, NEIGHBOUR_STRIDE, type StructureAnalysis } from '../graph/analysis.js';

const AROMATIC_BOND = 4;
const NITRO_BOND = 5;

function mix(hash: number, value: number): number {
  // The hash is scrambled before the value comes in: hash and value must not be interchangeable.
  let h = Math.imul((Math.imul(hash, 0x2c1b3c6d) + 0x51ed270b) ^ value, 0x9e3779b1);
  h ^= h >>> 15;
  h = Math.imul(h, 0x85ebca77);
  return h ^ (h >>> 13);
}

/**
 * Sets of atoms that look alike from everywhere in the structure, resonance forms laid over each other: iterated
 * hashing of neighbourhoods (Morgan, J. Chem. Doc. 1965, 5, 107). Never finer than the exact orbits of
 * `workers/graph/equivalence` (equal hashes do not prove equivalence), and equal to them for nearly every molecule.
 *
 * Scratch and result in one; overwritten by each `find`, nothing is allocated.
 */
export class Environments {
  /** Class of each heavy atom, numbered from 0 by first member. */
  readonly classOf: Uint8Array;
  classCount = 0;
  /** Per class: atoms in it, and its first atom. */
  readonly size: Uint8Array;
  readonly first: Uint8Array;

  private colour: Int32Array;
  private next: Int32Array;
  private readonly charge: Int8Array;
  private readonly isNitro: Uint8Array;

  constructor(maxAtoms: number = MAX_ATOMS) {
    this.classOf = new Uint8Array(maxAtoms);
    this.size = new Uint8Array(maxAtoms);
    this.first = new Uint8Array(maxAtoms);
    this.colour = new Int32Array(maxAtoms);
    this.next = new Int32Array(maxAtoms);
    this.charge = new Int8Array(maxAtoms);
    this.isNitro = new Uint8Array(maxAtoms);
  }

  /** @param s - read only. @returns number of classes. */
  find(s: StructureAnalysis): number {
    const { atomCount: n, atomicNumbers, hydrogens } = s.graph;
    this.normaliseNitro(s);
    for (let a = 0; a < n; a++) {
      this.colour[a] = mix(0, (atomicNumbers[a] << 8) | (hydrogens[a] << 4) | ((this.charge[a] + 2) << 1) | s.aromaticAtoms[a]);
    }
    let count = this.number(n, this.colour);
    // Invariant: classes only ever split, so as soon as a round splits none the partition is stable.
    while (count < n) {
      this.refine(s);
      const refined = this.number(n, this.next);
      const swap = this.colour;
      this.colour = this.next;
      this.next = swap;
      if (refined === count) break;
      count = refined;
    }
    this.classCount = count;
    return count;
  }

  /** Both oxygens of a nitro group count as equal: their charges and bonds change places between resonance forms. */
  private normaliseNitro(s: StructureAnalysis): void {
    const { atomCount: n, atomicNumbers, hydrogens, charges } = s.graph;
    for (let a = 0; a < n; a++) {
      this.charge[a] = charges[a];
      this.isNitro[a] = 0;
    }
    for (let a = 0; a < n; a++) {
      if (atomicNumbers[a] !== 7 || charges[a] !== 1 || s.degrees[a] !== 3) continue;
      let oxygens = 0;
      for (let k = 0; k < 3; k++) if (this.isEndOxygen(s, s.neighbours[a * NEIGHBOUR_STRIDE + k], atomicNumbers, hydrogens)) oxygens++;
      if (oxygens !== 2) continue;
      this.isNitro[a] = 1;
      for (let k = 0; k < 3; k++) {
        const b = s.neighbours[a * NEIGHBOUR_STRIDE + k];
        if (this.isEndOxygen(s, b, atomicNumbers, hydrogens)) {
          this.charge[b] = 0;
          this.isNitro[b] = 1;
        }
      }
    }
  }

  private isEndOxygen(s: StructureAnalysis, atom: number, atomicNumbers: Uint8Array, hydrogens: Uint8Array): boolean {
    return atomicNumbers[atom] === 8 && s.degrees[atom] === 1 && hydrogens[atom] === 0;
  }

  private refine(s: StructureAnalysis): void {
    const { colour, next, isNitro } = this;
    const { atomCount: n, bondOrders } = s.graph;
    for (let a = 0; a < n; a++) {
      // A sum does not depend on the order of the neighbours.
      let sum = 0;
      const degree = s.degrees[a];
      for (let k = 0; k < degree; k++) {
        const b = s.neighbours[a * NEIGHBOUR_STRIDE + k];
        const bond =
          s.aromaticBonds[a * n + b] === 1 ? AROMATIC_BOND : isNitro[a] === 1 && isNitro[b] === 1 ? NITRO_BOND : bondOrders[a * n + b];
        sum = (sum + mix(colour[b], bond)) | 0;
      }
      next[a] = mix(mix(colour[a], sum), degree);
    }
  }

  /** Numbers equal colours alike, by first member. */
  private number(n: number, colour: Int32Array): number {
    const { classOf, size, first } = this;
    let count = 0;
    for (let a = 0; a < n; a++) {
      let c = 0;
      while (c < count && colour[first[c]] !== colour[a]) c++;
      if (c === count) {
        first[count] = a;
        size[count] = 0;
        count++;
      }
      classOf[a] = c;
      size[c]++;
    }
    return count;
  }
}
