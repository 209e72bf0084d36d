/**
 * A constitution (or a fragment without its attachment points) as the engine sees it: heavy atoms only,
 * one Kekulé form, hydrogens as counts. Plain typed arrays, so that it crosses the worker boundary as it is.
 */
export interface MolecularGraph {
  /** Number of heavy atoms, n. */
  readonly atomCount: number;
  /** Atomic numbers, length n. */
  readonly atomicNumbers: Uint8Array;
  /** Hydrogens attached to each heavy atom, length n. */
  readonly hydrogens: Uint8Array;
  /** Formal charges, length n; only charge-separated neutral groups occur (nitro, N-oxide, azide …). */
  readonly charges: Int8Array;
  /** n × n, row-major, symmetric, zero diagonal; 0 no bond, 1–3 the bond order in this Kekulé form. */
  readonly bondOrders: Uint8Array;
}
