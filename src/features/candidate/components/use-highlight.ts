import { useCallback, useMemo, useState } from 'react';
import type { SignalRow } from './signal-rows';
import { stickKeys } from './signal-rows';

/** What is pointed at: a line of a table, a stick of a plot or an atom of the drawing. */
type Pointed =
  | { readonly kind: 'row'; readonly key: string }
  | { readonly kind: 'stick'; readonly key: string }
  | { readonly kind: 'atoms'; readonly atoms: readonly number[] };

export interface Highlight {
  readonly rowKeys: ReadonlySet<string>;
  readonly stickKeys: ReadonlySet<string>;
  readonly atoms: readonly number[];
  readonly pointAtRow: (key: string | null) => void;
  readonly pointAtStick: (key: string | null) => void;
  readonly pointAtAtoms: (atoms: readonly number[] | null) => void;
}

/** One pointer for tables, plots and drawing: pointing at any of them lights up the same signal in the others. */
export function useHighlight(rows: readonly SignalRow[]): Highlight {
  const [pointed, setPointed] = useState<Pointed | null>(null);
  const lit = useMemo(() => {
    if (pointed === null) return [];
    if (pointed.kind === 'row') return rows.filter((row) => row.key === pointed.key);
    if (pointed.kind === 'stick') return rows.filter((row) => stickKeys(row).includes(pointed.key));
    return rows.filter((row) => row.atoms.some((atom) => pointed.atoms.includes(atom)));
  }, [pointed, rows]);
  return {
    rowKeys: useMemo(() => new Set(lit.map((row) => row.key)), [lit]),
    stickKeys: useMemo(() => new Set(lit.flatMap(stickKeys)), [lit]),
    atoms: useMemo(() => (pointed?.kind === 'atoms' ? pointed.atoms : [...new Set(lit.flatMap((row) => row.atoms))]), [pointed, lit]),
    pointAtRow: useCallback((key: string | null) => setPointed(key === null ? null : { kind: 'row', key }), []),
    pointAtStick: useCallback((key: string | null) => setPointed(key === null ? null : { kind: 'stick', key }), []),
    pointAtAtoms: useCallback(
      (atoms: readonly number[] | null) => setPointed(atoms === null || atoms.length === 0 ? null : { kind: 'atoms', atoms }),
      [],
    ),
  };
}
