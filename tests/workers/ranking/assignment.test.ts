import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { TransportSolver } from '../../../workers/ranking/assignment.js';

interface Problem {
  rows: number;
  columns: number;
  cost: number[];
  rowRest: number[];
  columnRest: number[];
  supply: number[];
  demand: number[];
}

const problem = (maxSize: number, maxUnits: number): fc.Arbitrary<Problem> =>
  fc.tuple(fc.integer({ min: 0, max: maxSize }), fc.integer({ min: 0, max: maxSize })).chain(([rows, columns]) => {
    const price = fc.double({ min: 0, max: 20, noNaN: true });
    const units = fc.integer({ min: 1, max: maxUnits });
    const list = <T>(item: fc.Arbitrary<T>, size: number) => fc.array(item, { minLength: size, maxLength: size });
    return fc.record({
      rows: fc.constant(rows),
      columns: fc.constant(columns),
      cost: list(price, rows * columns),
      rowRest: list(price, rows),
      columnRest: list(price, columns),
      supply: list(units, rows),
      demand: list(units, columns),
    });
  });

const solver = new TransportSolver(12, 12);
function solve(p: Problem): number {
  solver.cost.set(p.cost);
  solver.rowRest.set(p.rowRest);
  solver.columnRest.set(p.columnRest);
  solver.supply.set(p.supply);
  solver.demand.set(p.demand);
  return solver.solve(p.rows, p.columns);
}

/** Every one-to-one placement, dummies included. */
function bruteForce(p: Problem): number {
  let best = Infinity;
  const used = new Array<boolean>(p.columns).fill(false);
  const place = (row: number, cost: number): void => {
    if (row === p.rows) {
      best = Math.min(best, cost + p.columnRest.reduce((sum, rest, c) => (used[c] ? sum : sum + rest), 0));
      return;
    }
    place(row + 1, cost + p.rowRest[row]);
    for (let c = 0; c < p.columns; c++) {
      if (used[c]) continue;
      used[c] = true;
      place(row + 1, cost + p.cost[row * p.columns + c]);
      used[c] = false;
    }
  };
  place(0, 0);
  return best;
}

/** The same problem with every unit a row or column of its own. */
function unitProblem(p: Problem): Problem {
  const rows = p.supply.flatMap((units, r) => new Array<number>(units).fill(r));
  const columns = p.demand.flatMap((units, c) => new Array<number>(units).fill(c));
  return {
    rows: rows.length,
    columns: columns.length,
    cost: rows.flatMap((r) => columns.map((c) => p.cost[r * p.columns + c])),
    rowRest: rows.map((r) => p.rowRest[r]),
    columnRest: columns.map((c) => p.columnRest[c]),
    supply: rows.map(() => 1),
    demand: columns.map(() => 1),
  };
}

describe('TransportSolver', () => {
  it('finds the optimum of the assignment problem with dummies (against all placements)', () => {
    fc.assert(
      fc.property(problem(6, 1), (p) => {
        expect(solve(p)).toBeCloseTo(bruteForce(p), 6);
      }),
      { numRuns: 300 },
    );
  });

  it('treats a supply of several units like as many equal rows', () => {
    fc.assert(
      fc.property(problem(3, 2), (p) => {
        expect(solve(p)).toBeCloseTo(bruteForce(unitProblem(p)), 6);
      }),
      { numRuns: 200 },
    );
  });

  it('reports a flow that costs what it returns and breaks no bound', () => {
    fc.assert(
      fc.property(problem(10, 5), (p) => {
        const total = solve(p);
        let cost = 0;
        for (let r = 0; r < p.rows; r++) {
          let laid = 0;
          for (let c = 0; c < p.columns; c++) {
            laid += solver.flow[r * p.columns + c];
            cost += solver.flow[r * p.columns + c] * p.cost[r * p.columns + c];
          }
          expect(laid + solver.rowLeft[r]).toBe(p.supply[r]);
          cost += solver.rowLeft[r] * p.rowRest[r];
        }
        for (let c = 0; c < p.columns; c++) {
          let laid = 0;
          for (let r = 0; r < p.rows; r++) laid += solver.flow[r * p.columns + c];
          expect(laid + solver.columnLeft[c]).toBe(p.demand[c]);
          cost += solver.columnLeft[c] * p.columnRest[c];
        }
        expect(total).toBeCloseTo(cost, 6);
      }),
    );
  });

  it('pairs sorted lists in order when the cost is convex (rearrangement; Hardy, Littlewood, Pólya, Inequalities, theorem 368)', () => {
    const shifts = fc.array(fc.double({ min: 0, max: 200, noNaN: true }), { minLength: 5, maxLength: 5 });
    fc.assert(
      fc.property(shifts, shifts, (observed, predicted) => {
        const sorted = [...observed].sort((a, b) => a - b);
        const best = [...predicted].sort((a, b) => a - b).reduce((sum, x, i) => sum + (x - sorted[i]) ** 2, 0);
        const found = solve({
          rows: 5,
          columns: 5,
          cost: predicted.flatMap((x) => observed.map((y) => (x - y) ** 2)),
          rowRest: [1e6, 1e6, 1e6, 1e6, 1e6],
          columnRest: [1e6, 1e6, 1e6, 1e6, 1e6],
          supply: [1, 1, 1, 1, 1],
          demand: [1, 1, 1, 1, 1],
        });
        expect(Math.abs(found - best)).toBeLessThan(1e-6 * (1 + best));
      }),
    );
  });
});
