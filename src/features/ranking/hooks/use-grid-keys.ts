import type { KeyboardEvent } from 'react';

export interface GridMoves {
  readonly total: number;
  /** Cards in a row; 1 in a table. */
  readonly columns: number;
  /** Rows that fit on a screen, for the page keys. */
  readonly rowsOnScreen: number;
}

/**
 * Where a key leads in a grid that is filled row by row.
 *
 * @param index - current position, or null when nothing is selected: then any move goes to the first.
 * @returns the new position, or null when the key does not move.
 */
export function moveByKey(key: string, index: number | null, { total, columns, rowsOnScreen }: GridMoves): number | null {
  if (total === 0) return null;
  const steps: Readonly<Record<string, number>> = {
    ArrowDown: columns,
    ArrowUp: -columns,
    PageDown: columns * rowsOnScreen,
    PageUp: -columns * rowsOnScreen,
    ...(columns > 1 ? { ArrowRight: 1, ArrowLeft: -1 } : {}),
  };
  if (key === 'Home') return 0;
  if (key === 'End') return total - 1;
  const step = steps[key];
  if (step === undefined) return null;
  if (index === null) return 0;
  const target = index + step;
  // A step of whole rows beyond the edge stays; a page beyond it goes to the edge.
  if (target < 0) return key === 'PageUp' ? index % columns : index;
  if (target >= total) return key === 'PageDown' ? total - 1 : index;
  return target;
}

interface GridKeyActions extends GridMoves {
  readonly index: number | null;
  readonly onMove: (index: number) => void;
  readonly onOpen: () => void;
  readonly onKeep: () => void;
}

/** Key handler of the candidates: arrows move, Enter opens, K keeps. Buttons inside a row keep their own keys. */
export function useGridKeys({ index, onMove, onOpen, onKeep, ...moves }: GridKeyActions) {
  return (event: KeyboardEvent<HTMLElement>) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const target = moveByKey(event.key, index, moves);
    if (target !== null) {
      event.preventDefault();
      onMove(target);
      return;
    }
    const isOnButton =
      event.target instanceof Element && event.target !== event.currentTarget && event.target.closest('button, a') !== null;
    if (index === null || isOnButton) return;
    if (event.key === 'Enter') {
      event.preventDefault();
      onOpen();
    } else if (event.key === 'k' || event.key === 'K') {
      event.preventDefault();
      onKeep();
    }
  };
}
