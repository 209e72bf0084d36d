/** Rounding noise of sums of logarithms; smaller gains are none. */
const NO_GAIN = -1e-9;
const UNREACHED = Infinity;

/**
 * Cheapest way to lay predicted environments (rows) on observed signals (columns), exact.
 *
 * Each row has a supply and each column a demand; a unit laid from row r on column c costs `cost[r * columns + c]`. What is
 * not laid anywhere costs `rowRest[r]` or `columnRest[c]` a unit, so that extra signals and missing ones have a finite price.
 * With all supplies and demands 1 this is the assignment problem with dummy rows and columns (Kuhn 1955; Munkres 1957);
 * the general case is a transportation problem. Method: successive shortest augmenting paths, which keep the flow
 * cheapest for its size, until a path gains nothing (Busacker & Gowen 1961, from memory).
 *
 * One instance holds the scratch for problems up to its size; nothing is allocated by `solve`.
 */
export class TransportSolver {
  /** Set by the caller before `solve`: rows × columns, row-major. */
  readonly cost: Float64Array;
  readonly rowRest: Float64Array;
  readonly columnRest: Float64Array;
  readonly supply: Int32Array;
  readonly demand: Int32Array;
  /** Result: units laid from row r on column c, rows × columns. */
  readonly flow: Int32Array;
  /** Result: units left over. */
  readonly rowLeft: Int32Array;
  readonly columnLeft: Int32Array;

  private readonly gain: Float64Array;
  private readonly rowDistance: Float64Array;
  private readonly columnDistance: Float64Array;
  /** Column through which a row was reached, −1 at a start row; row through which a column was reached. */
  private readonly rowFrom: Int32Array;
  private readonly columnFrom: Int32Array;

  constructor(
    readonly maxRows: number,
    readonly maxColumns: number,
  ) {
    this.cost = new Float64Array(maxRows * maxColumns);
    this.gain = new Float64Array(maxRows * maxColumns);
    this.flow = new Int32Array(maxRows * maxColumns);
    this.rowRest = new Float64Array(maxRows);
    this.columnRest = new Float64Array(maxColumns);
    this.supply = new Int32Array(maxRows);
    this.demand = new Int32Array(maxColumns);
    this.rowLeft = new Int32Array(maxRows);
    this.columnLeft = new Int32Array(maxColumns);
    this.rowDistance = new Float64Array(maxRows);
    this.columnDistance = new Float64Array(maxColumns);
    this.rowFrom = new Int32Array(maxRows);
    this.columnFrom = new Int32Array(maxColumns);
  }

  /**
   * Solves the problem set up in the public arrays.
   *
   * @param rows - in [0, maxRows]. @param columns - in [0, maxColumns].
   * @returns the least total cost; `flow`, `rowLeft` and `columnLeft` tell how it is reached.
   */
  solve(rows: number, columns: number): number {
    const { cost, gain, flow, rowRest, columnRest, supply, demand, rowLeft, columnLeft } = this;
    let total = 0;
    for (let r = 0; r < rows; r++) {
      rowLeft[r] = supply[r];
      total += supply[r] * rowRest[r];
    }
    for (let c = 0; c < columns; c++) {
      columnLeft[c] = demand[c];
      total += demand[c] * columnRest[c];
    }
    for (let r = 0; r < rows; r++) {
      for (let c = 0; c < columns; c++) {
        const k = r * columns + c;
        flow[k] = 0;
        gain[k] = cost[k] - rowRest[r] - columnRest[c];
      }
    }
    for (;;) {
      const end = this.findPath(rows, columns);
      if (end === -1) return total;
      total += this.columnDistance[end] * this.augment(end, columns);
    }
  }

  /** Bellman–Ford over the residual graph. Returns the column at which the best path ends, −1 if none gains. */
  private findPath(rows: number, columns: number): number {
    const { gain, flow, rowLeft, columnLeft, rowDistance, columnDistance, rowFrom, columnFrom } = this;
    for (let r = 0; r < rows; r++) {
      rowDistance[r] = rowLeft[r] > 0 ? 0 : UNREACHED;
      rowFrom[r] = -1;
    }
    for (let c = 0; c < columns; c++) columnDistance[c] = UNREACHED;
    // The flow is cheapest for its size, so there is no negative cycle and at most rows + columns rounds change anything.
    for (let round = 0; round <= rows + columns; round++) {
      let changed = false;
      for (let r = 0; r < rows; r++) {
        const start = rowDistance[r];
        if (start === UNREACHED) continue;
        for (let c = 0; c < columns; c++) {
          const distance = start + gain[r * columns + c];
          if (distance < columnDistance[c] + NO_GAIN) {
            columnDistance[c] = distance;
            columnFrom[c] = r;
            changed = true;
          }
        }
      }
      if (!changed) break;
      changed = false;
      for (let c = 0; c < columns; c++) {
        const start = columnDistance[c];
        if (start === UNREACHED) continue;
        for (let r = 0; r < rows; r++) {
          const k = r * columns + c;
          if (flow[k] === 0) continue;
          const distance = start - gain[k];
          if (distance < rowDistance[r] + NO_GAIN) {
            rowDistance[r] = distance;
            rowFrom[r] = c;
            changed = true;
          }
        }
      }
      if (!changed) break;
    }
    let best = -1;
    let bestDistance = NO_GAIN;
    for (let c = 0; c < columns; c++) {
      if (columnLeft[c] > 0 && columnDistance[c] < bestDistance) {
        bestDistance = columnDistance[c];
        best = c;
      }
    }
    return best;
  }

  /** Pushes as many units as fit along the path that ends in column `end`; returns how many. */
  private augment(end: number, columns: number): number {
    const { flow, rowLeft, columnLeft, rowFrom, columnFrom } = this;
    let units = columnLeft[end];
    let row = columnFrom[end];
    while (rowFrom[row] !== -1) {
      const column = rowFrom[row];
      units = Math.min(units, flow[row * columns + column]);
      row = columnFrom[column];
    }
    units = Math.min(units, rowLeft[row]);
    rowLeft[row] -= units;
    columnLeft[end] -= units;
    let column = end;
    for (;;) {
      row = columnFrom[column];
      flow[row * columns + column] += units;
      if (rowFrom[row] === -1) return units;
      column = rowFrom[row];
      flow[row * columns + column] -= units;
    }
  }
}
