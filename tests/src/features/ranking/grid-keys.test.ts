import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { moveByKey } from '../../../../src/features/ranking/hooks/use-grid-keys.js';
import { readRankingView } from '../../../../src/features/ranking/hooks/use-ranking-view.js';
import { selectionIndex } from '../../../../src/features/ranking/hooks/selection-index.js';

describe('keys in the list of candidates', () => {
  const cards = { total: 23, columns: 5, rowsOnScreen: 3 };

  it('move by one and by whole rows among cards', () => {
    expect(moveByKey('ArrowRight', 3, cards)).toBe(4);
    expect(moveByKey('ArrowDown', 3, cards)).toBe(8);
    expect(moveByKey('PageDown', 3, cards)).toBe(18);
    expect(moveByKey('Home', 17, cards)).toBe(0);
    expect(moveByKey('End', 0, cards)).toBe(22);
  });

  it('leave left and right to the browser in a table', () => {
    expect(moveByKey('ArrowRight', 3, { total: 23, columns: 1, rowsOnScreen: 9 })).toBeNull();
  });

  it('start at the first candidate when nothing is selected', () => {
    expect(moveByKey('ArrowDown', null, cards)).toBe(0);
  });

  it('never leave the list', () => {
    fc.assert(
      fc.property(
        fc.constantFrom('ArrowUp', 'ArrowDown', 'ArrowLeft', 'ArrowRight', 'PageUp', 'PageDown', 'Home', 'End'),
        fc.integer({ min: 1, max: 1000 }),
        fc.integer({ min: 1, max: 8 }),
        fc.nat(),
        (key, total, columns, seed) => {
          const target = moveByKey(key, seed % total, { total, columns, rowsOnScreen: 3 });
          if (target === null) return;
          expect(target).toBeGreaterThanOrEqual(0);
          expect(target).toBeLessThan(total);
        },
      ),
    );
  });

  it('do nothing for other keys and in an empty list', () => {
    expect(moveByKey('x', 3, cards)).toBeNull();
    expect(moveByKey('End', null, { ...cards, total: 0 })).toBeNull();
  });
});

describe('the selection', () => {
  const bySmiles = [{ rank: 4 }, { rank: 1 }, { rank: 2 }, undefined];
  const at = (index: number) => bySmiles[index];

  it('is found by arithmetic in the order of ranks, loaded or not', () => {
    expect(selectionIndex(700, { sort: 'rank', direction: 'ascending' }, 1000, () => undefined)).toBe(699);
    expect(selectionIndex(700, { sort: 'rank', direction: 'descending' }, 1000, () => undefined)).toBe(300);
    expect(selectionIndex(1001, { sort: 'rank', direction: 'ascending' }, 1000, () => undefined)).toBeNull();
  });

  it('is found by looking in any other order', () => {
    expect(selectionIndex(2, { sort: 'smiles', direction: 'ascending' }, 4, at)).toBe(2);
    expect(selectionIndex(3, { sort: 'smiles', direction: 'ascending' }, 4, at)).toBeNull();
  });
});

it('ignores nonsense in the address of a ranking', () => {
  expect(readRankingView(new URLSearchParams('view=wall&sort=colour&direction=sideways&selected=-3'))).toEqual({
    layout: 'cards',
    order: { sort: 'rank', direction: 'ascending' },
    selectedRank: null,
  });
});
