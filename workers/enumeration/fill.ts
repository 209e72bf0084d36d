import { readFileSync } from 'node:fs';
import type { FillLayout, RingLimits } from './layout.js';

/** What a search asks of its caller. Return true to stop the search. */
export interface FillEvents {
  /**
   * A complete canonical matrix.
   * @param bondOrders - `open` rows and columns, row-major with {@link FILL_STRIDE}, reused buffer.
   * @param molecule - the same with the bonds inside units, n × n in the order of the layout's graph, reused buffer.
   * @param mayHaveOtherForms - false: certainly no other Kekulé form, bonds inside units aside, or not asked for by the layout.
   */
  onLeaf(bondOrders: Uint8Array, molecule: Uint8Array, mayHaveOtherForms: boolean): boolean;
  /** Rows [0, row) are filled and `stopRow` was reached: entries in filling order, fresh array. */
  onPrefix?(prefix: number[]): void;
  /** Rows [0, known) are complete; false cuts everything below. Asked before the canonicity test. */
  onRow?(bondOrders: Uint8Array, known: number, molecule: Uint8Array): boolean;
  /** Called every few thousand rows; true ends the search. */
  shouldStop(): boolean;
}

/** Most open vertices; the stride of every matrix here. */
export const FILL_STRIDE = 40;

/** What the compiled inner loop offers: see assembly/fill.ts. Addresses are bytes in its memory. */
interface FillCore {
  readonly memory: { readonly buffer: ArrayBuffer };
  matrix(): number;
  freeValence(): number;
  bondQuota(): number;
  classes(): number;
  units(): number;
  allowedOrders(): number;
  adjacency(): number;
  molecule(): number;
  insideBonds(): number;
  resonantBonds(): number;
  cuts(): number;
  limitRings(smallest: number, largest: number, alkyne: number, allene: number, carbons: bigint): void;
  describe(atoms: number, tellsForms: boolean, donors: bigint): void;
  tiedPairs(): number;
  prefix(): number;
  reserve(permutations: number, tied: number): number;
  run(open: number, tied: number, pairs: number, forbids: boolean, asksRows: boolean, stopRow: number, prefixRows: number): number;
}

/** The part of the WebAssembly interface that is used; its types are otherwise declared for browsers only. */
interface WebAssemblyApi {
  readonly Module: new (binary: Uint8Array) => object;
  readonly Instance: new (module: object, imports: Record<string, Record<string, unknown>>) => { readonly exports: unknown };
}
const { Instance, Module } = (globalThis as unknown as { WebAssembly: WebAssemblyApi }).WebAssembly;

/*
 * One instance a thread: its memory is the state of the one search that runs in the thread, so that nothing is allocated
 * for a layout, let alone for a structure.
 */
let events: FillEvents | null = null;
let layout: FillLayout;
let tiedPairs: number[] = [];
let matrix: Uint8Array;
let molecule: Uint8Array;

const core = new Instance(new Module(readFileSync(new URL('./fill.wasm', import.meta.url))), {
  host: {
    onLeaf: (mayHaveOtherForms: number) => events!.onLeaf(matrix, molecule, mayHaveOtherForms === 1),
    onPrefix: (row: number) => events!.onPrefix!(currentPrefix(row)),
    onRow: (known: number) => events!.onRow!(matrix, known, molecule),
    shouldStop: () => events!.shouldStop(),
  },
}).exports as FillCore;

/**
 * Orderly generation of connectivity matrices, row by row, larger entries first; no table of seen matrices.
 *
 * A matrix is produced exactly when it is the lexicographically largest one (pairs of tied vertices first, then rows
 * in order, each over the columns to its right) among all permutations that keep classes and units. After each row
 * the same test runs on the filled rows; a partial matrix that some permutation makes larger has no canonical
 * completion, because a completion keeps the entries that decided. (Read, Ann. Discrete Math. 1978, 2, 107; Faradžev,
 * Colloq. Int. CNRS 1978, 260, 131; row-wise filling: Grund, Bayreuther Math. Schr. 1995, 49, 1.)
 *
 * Not re-entrant: a thread runs one search at a time; events must not start another.
 *
 * @param of - vertices, classes and prescribed bonds; read only.
 * @param prefix - where to begin: empty = the root. Trusted: it came from `onPrefix` of the same layout.
 * @param stopRow - above 0: report prefixes of that many rows instead of going deeper; leaves that are complete before
 *   are reported as leaves.
 * @returns false when an event ended it.
 */
export function fill(of: FillLayout, prefix: readonly number[], stopRow: number, handler: FillEvents): boolean {
  if (events !== null) throw new Error('a fill is running in this thread already');
  events = handler;
  try {
    layout = of;
    load(of);
    if (prefix.length > 0) bytes(core.prefix(), prefix.length - 1).set(prefix.slice(1));
    return (
      core.run(
        of.open,
        of.tied,
        tiedPairs.length / 2,
        of.allowedOrders !== null,
        handler.onRow !== undefined,
        stopRow,
        prefix.length > 0 ? prefix[0] : -1,
      ) === 1
    );
  } finally {
    events = null;
  }
}

/** Branches that the last search cut by each limit on rings. */
export function ringCuts(): Readonly<Record<keyof RingLimits, number>> {
  const [smallest, largest, alkyne, allene] = new Uint32Array(core.memory.buffer, core.cuts(), 4);
  return { smallest, largest, alkyne, allene };
}

function bytes(address: number, length: number): Uint8Array {
  return new Uint8Array(core.memory.buffer, address, length);
}

/** Writes a layout into the memory of the core. */
function load(of: FillLayout): void {
  const { open, tied, unitOf, tiedPermutations, allowedOrders, base, resonantBonds } = of;
  const permutations = core.reserve(tiedPermutations.length, tied);
  const n = base.atomCount;
  // Growing the memory detaches views of it.
  matrix = bytes(core.matrix(), FILL_STRIDE * FILL_STRIDE);
  molecule = bytes(core.molecule(), n * n);
  molecule.set(base.bondOrders);
  tiedPermutations.forEach((permutation, k) => bytes(permutations + k * tied, tied).set(permutation));
  bytes(core.freeValence(), open).set(of.freeValence);
  bytes(core.bondQuota(), 4 * open).set(of.bondQuota);
  // Only equality matters; unit instances and classes are numbered from 0 and fit into a byte.
  bytes(core.classes(), open).set(of.classOf);
  bytes(core.units(), open).set(unitOf);
  if (allowedOrders !== null) bytes(core.allowedOrders(), FILL_STRIDE * FILL_STRIDE).set(allowedOrders);
  tiedPairs = [];
  for (let i = 0; i < tied; i++) for (let j = i + 1; j < tied; j++) if (unitOf[i] !== unitOf[j]) tiedPairs.push(i, j);
  bytes(core.tiedPairs(), tiedPairs.length).set(tiedPairs);

  const adjacency = masks(core.adjacency(), FILL_STRIDE);
  const inside = masks(core.insideBonds(), 3 * FILL_STRIDE).fill(0n);
  const resonant = masks(core.resonantBonds(), FILL_STRIDE);
  let donors = 0n;
  let carbons = 0n;
  for (let i = 0; i < n; i++) {
    adjacency[i] = resonant[i] = 0n;
    for (let j = 0; j < n; j++) {
      const order = base.bondOrders[i * n + j];
      if (order === 0) continue;
      const bit = 1n << BigInt(j);
      adjacency[i] |= bit;
      inside[3 * i + order - 1] |= bit;
      if (resonantBonds !== null && resonantBonds[i * n + j] === 1) resonant[i] |= bit;
    }
    // Carbon and silicon without a charge take part in an aromatic ring by a double bond only.
    const element = base.atomicNumbers[i];
    if (element === 6) carbons |= 1n << BigInt(i);
    if ((element !== 6 && element !== 14) || base.charges[i] !== 0) donors |= 1n << BigInt(i);
  }
  const { smallest, largest, alkyne, allene } = of.ringLimits;
  core.limitRings(smallest, largest ?? 0, alkyne, allene, carbons);
  core.describe(n, of.tellsForms, donors);
}

function masks(address: number, length: number): BigUint64Array {
  return new BigUint64Array(core.memory.buffer, address, length);
}

/** Rows [0, rows) as they stand: their number, the tied pairs, then the entries to the right in filling order. */
function currentPrefix(rows: number): number[] {
  const { open, tied } = layout;
  const entries = [rows];
  for (let k = 0; k < tiedPairs.length; k += 2) entries.push(matrix[tiedPairs[k] * FILL_STRIDE + tiedPairs[k + 1]]);
  for (let i = 0; i < rows; i++) for (let j = i < tied ? tied : i + 1; j < open; j++) entries.push(matrix[i * FILL_STRIDE + j]);
  return entries;
}
