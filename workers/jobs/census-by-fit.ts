import type { Search, SearchBranch } from '../enumeration/search.js';

const CARBON = 6;
/** Pulls coefficients towards nothing where branches are too alike to tell; on features of the size of a few atoms. */
const RIDGE = 0.05;
/** Probed branches beyond as many as the fit has coefficients. */
const SPARE_BRANCHES = 5;

/**
 * Expected fall of a search by a census of its carbons, where single branches are known too badly: the logarithm of their
 * sizes is fitted by a quadratic form in the numbers of CH, CH2, CH3, hydrogens elsewhere and formed groups, over all branches
 * that were probed, and the fitted sizes of all branches are added up by census. What one probe is off by then hardly counts.
 *
 * @param branchSizes - estimates; NaN or 0 where nothing is known.
 * @returns null with fewer probed branches than the fit can use.
 */
export function fallByFittedCensus(search: Search, branchSizes: Float64Array): number | null {
  const rows = search.branches.map(featuresOf);
  const width = rows[0]?.length ?? 0;
  const known = rows.flatMap((_, d) => (branchSizes[d] > 0 ? [d] : []));
  if (known.length < width + SPARE_BRANCHES) return null;
  const matrix = Array.from({ length: width }, (_, i) => new Float64Array(width + 1).fill(0).map((_, j) => (i === j ? RIDGE : 0)));
  for (const d of known) {
    const size = Math.log(branchSizes[d]);
    for (let i = 0; i < width; i++) {
      for (let j = 0; j < width; j++) matrix[i][j] += rows[d][i] * rows[d][j];
      matrix[i][width] += rows[d][i] * size;
    }
  }
  const coefficients = solve(matrix);
  const logSizes = rows.map((row) => row.reduce((sum, value, i) => sum + value * coefficients[i], 0));
  const largest = logSizes.reduce((most, value) => Math.max(most, value), -Infinity);
  const sizes = new Map<string, number>();
  let total = 0;
  search.branches.forEach((branch, d) => {
    const size = Math.exp(logSizes[d] - largest);
    const census = censusOf(branch).join();
    sizes.set(census, (sizes.get(census) ?? 0) + size);
    total += size;
  });
  let squares = 0;
  for (const size of sizes.values()) squares += size * size;
  return (total * total) / squares;
}

/** Carbons by attached hydrogens, those in fragments and formed groups included. */
function censusOf({ problem, distribution }: SearchBranch): number[] {
  const census = [0, 0, 0, 0, 0];
  for (const { graph, count } of problem.units)
    for (let a = 0; a < graph.atomCount; a++) if (graph.atomicNumbers[a] === CARBON) census[graph.hydrogens[a]] += count;
  for (const { atomicNumber, hydrogens, count } of distribution) if (atomicNumber === CARBON) census[hydrogens] += count;
  return census;
}

function featuresOf(branch: SearchBranch): number[] {
  const [, ch, ch2, ch3] = censusOf(branch);
  let elsewhere = 0;
  for (const { atomicNumber, hydrogens, count } of branch.distribution) if (atomicNumber !== CARBON) elsewhere += hydrogens * count;
  const units = branch.problem.units.reduce((sum, { count }) => sum + count, 0);
  const linear = [ch, ch2, ch3, elsewhere, units];
  return [1, ...linear, ...linear.flatMap((value, i) => linear.slice(i).map((other) => value * other))];
}

/** Solves a system of linear equations, right sides in the last column, by elimination with row exchange. */
function solve(rows: Float64Array[]): Float64Array {
  const size = rows.length;
  for (let column = 0; column < size; column++) {
    let pivot = column;
    for (let row = column + 1; row < size; row++) if (Math.abs(rows[row][column]) > Math.abs(rows[pivot][column])) pivot = row;
    [rows[column], rows[pivot]] = [rows[pivot], rows[column]];
    for (let row = 0; row < size; row++) {
      if (row === column || rows[row][column] === 0) continue;
      const factor = rows[row][column] / rows[column][column];
      for (let k = column; k <= size; k++) rows[row][k] -= factor * rows[column][k];
    }
  }
  return Float64Array.from(rows, (row, k) => row[size] / row[k]);
}
