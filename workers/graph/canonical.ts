/**
 * Canonical labelling of small coloured multigraphs: partition refinement by hashed neighbourhoods, individualisation
 * of the first smallest non-trivial cell, and pruning by the automorphisms found on the way.
 * Departs from McKay (Congr. Numer. 1981, 30, 45) in that colours are 32-bit hashes: a collision makes the partition
 * coarser, never wrong, because leaves are compared by their full matrix.
 */
export interface CanonicalForm {
  /** Canonical order: position → vertex. */
  readonly order: Uint8Array;
  /** Upper triangle of the edge labels in canonical order, preceded by the vertex colours' ranks. Comparable with {@link compareCodes}. */
  readonly code: Uint16Array;
  /** Generators of the automorphism group, vertex → vertex. */
  readonly automorphisms: readonly Uint8Array[];
}

/** Compares two codes of equal-sized graphs: negative, zero, positive. */
export function compareCodes(a: Uint16Array, b: Uint16Array): number {
  const length = Math.min(a.length, b.length);
  for (let i = 0; i < length; i++) if (a[i] !== b[i]) return a[i] - b[i];
  return a.length - b.length;
}

function mix(hash: number, value: number): number {
  let h = Math.imul(hash ^ value, 0x9e3779b1);
  h ^= h >>> 15;
  h = Math.imul(h, 0x85ebca77);
  return (h ^ (h >>> 13)) >>> 0;
}

/**
 * Computes the canonical form of a coloured graph with labelled edges.
 *
 * @param n - vertices, 1 ≤ n ≤ 255.
 * @param colours - one number a vertex, part of the identity. Read only.
 * @param edges - n × n, row-major, symmetric, 0 = no edge. Read only.
 * @returns order, code and automorphisms; isomorphic inputs get equal codes, others different ones.
 */
export function canonicalForm(n: number, colours: Uint16Array, edges: Uint8Array): CanonicalForm {
  const start = Array.from(colours, (colour) => mix(0x51ed270b, colour));
  refine(n, start, edges);

  let best: { trace: number[]; order: Uint8Array; code: Uint16Array } | null = null;
  let first: { order: Uint8Array; code: Uint16Array; path: number[]; trace: number[] } | null = null;
  const automorphisms: Uint8Array[] = [];
  const path: number[] = [];

  const codeOf = (order: Uint8Array): Uint16Array => {
    const code = new Uint16Array(n + (n * (n - 1)) / 2);
    let k = 0;
    for (let i = 0; i < n; i++) code[k++] = colours[order[i]];
    for (let i = 0; i < n; i++) for (let j = i + 1; j < n; j++) code[k++] = edges[order[i] * n + order[j]];
    return code;
  };
  const learn = (from: Uint8Array, to: Uint8Array): void => {
    const image = new Uint8Array(n);
    for (let i = 0; i < n; i++) image[from[i]] = to[i];
    automorphisms.push(image);
  };

  /** Explores a node; returns the depth to fall back to when an automorphism with the first leaf was found, else −1. */
  const explore = (values: number[], trace: number[], alongFirst: boolean): number => {
    const cell = smallestCell(n, values);
    if (cell === null) {
      const order = Uint8Array.from(Array.from({ length: n }, (_, i) => i).sort((a, b) => values[a] - values[b]));
      const code = codeOf(order);
      if (first === null) {
        first = { order, code, path: [...path], trace: [...trace] };
        best = { trace: [...trace], order, code };
        return -1;
      }
      if (alongFirst && compareCodes(code, first.code) === 0) {
        learn(first.order, order);
        let common = 0;
        while (path[common] === first.path[common]) common++;
        return common;
      }
      const difference = compareTraces(trace, best!.trace) || compareCodes(code, best!.code);
      if (difference > 0) best = { trace: [...trace], order, code };
      else if (difference === 0) learn(best!.order, order);
      return -1;
    }
    const depth = path.length;
    const tried: number[] = [];
    for (const vertex of cell) {
      if (tried.length > 0 && inKnownOrbit(n, vertex, tried, path, automorphisms)) continue;
      tried.push(vertex);
      const next = values.slice();
      next[vertex] = mix(next[vertex], 0x2545f491);
      refine(n, next, edges);
      let summary = 0;
      for (const value of [...next].sort((a, b) => a - b)) summary = mix(summary, value);
      trace.push(summary);
      // A trace below the best one can still hold an automorphism with the first leaf, but no new best leaf.
      const followsFirst = alongFirst && (first === null || first.trace[depth] === summary);
      if (followsFirst || best === null || compareTraces(trace, best.trace.slice(0, depth + 1)) >= 0) {
        path.push(vertex);
        const fallBack = explore(next, trace, followsFirst);
        path.pop();
        if (fallBack !== -1 && fallBack < depth) {
          trace.pop();
          return fallBack;
        }
      }
      trace.pop();
    }
    return -1;
  };
  explore(start, [], true);
  const found = best as { order: Uint8Array; code: Uint16Array } | null;
  return { order: found!.order, code: found!.code, automorphisms };
}

function compareTraces(a: readonly number[], b: readonly number[]): number {
  const length = Math.min(a.length, b.length);
  for (let i = 0; i < length; i++) if (a[i] !== b[i]) return a[i] - b[i];
  return a.length - b.length;
}

/** Is `vertex` the image of a tried one under automorphisms that fix the path point by point? */
function inKnownOrbit(
  n: number,
  vertex: number,
  tried: readonly number[],
  path: readonly number[],
  automorphisms: readonly Uint8Array[],
): boolean {
  const parent = Array.from({ length: n }, (_, i) => i);
  const find = (i: number): number => {
    while (parent[i] !== i) i = parent[i] = parent[parent[i]];
    return i;
  };
  for (const image of automorphisms) {
    if (!path.every((fixed) => image[fixed] === fixed)) continue;
    for (let i = 0; i < n; i++) parent[find(i)] = find(image[i]);
  }
  const root = find(vertex);
  return tried.some((other) => find(other) === root);
}

/** Refines vertex values until the number of distinct ones stops growing. Overwrites `values`. */
function refine(n: number, values: number[], edges: Uint8Array): void {
  let distinct = new Set(values).size;
  const next = new Array<number>(n);
  while (distinct < n) {
    for (let i = 0; i < n; i++) {
      // Sums are independent of the order of neighbours, so no sorting is needed.
      let sum = 0;
      let product = 1;
      for (let j = 0; j < n; j++) {
        const label = edges[i * n + j];
        if (label === 0) continue;
        const part = mix(values[j], label);
        sum = (sum + part) >>> 0;
        product = Math.imul(product, part | 1);
      }
      next[i] = mix(mix(values[i], sum), product >>> 0);
    }
    const count = new Set(next).size;
    if (count === distinct) return;
    if (count < distinct) return;
    for (let i = 0; i < n; i++) values[i] = next[i];
    distinct = count;
  }
}

/** Vertices of the smallest cell with more than one member, the lowest value among equals; null when discrete. */
function smallestCell(n: number, values: readonly number[]): number[] | null {
  const cells = new Map<number, number[]>();
  for (let i = 0; i < n; i++) {
    const cell = cells.get(values[i]);
    if (cell === undefined) cells.set(values[i], [i]);
    else cell.push(i);
  }
  let chosen: number[] | null = null;
  let chosenValue = 0;
  for (const [value, cell] of cells) {
    if (cell.length < 2) continue;
    if (chosen === null || cell.length < chosen.length || (cell.length === chosen.length && value < chosenValue)) {
      chosen = cell;
      chosenValue = value;
    }
  }
  return chosen;
}
