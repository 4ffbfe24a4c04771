import { type ColumnProjector, columnProjectors, LANES } from "@/lib/signal/project-columns";
import { randomStream, shuffle } from "@/lib/signal/random";
import { triangularSums } from "@/lib/signal/statistics";

/** Columns of a band that are present in the same runs, and the directions of their linear model. */
export interface ColumnGroup {
  /** Indices of the columns. */
  columns: readonly number[];
  /** Runs that have a value there. */
  rows: readonly number[];
  /** Orthonormal basis of the model over all runs, one direction after the other, 0 where a run is missing; the side is last. */
  basis: Float64Array;
}

interface Kernel {
  columns: Int32Array;
  missing: number[];
  /** Residuals of a column one run after the other. */
  residuals: Float64Array;
  /** Passes over `LANES` directions each, interleaved by run; padded with directions of zeros in front. */
  passes: Float64Array[];
}

/**
 * Critical value of a simultaneous band: rows of `residuals` (runs × `count`, row-major, no gaps) are permuted as wholes with the
 * seeded stream, every column's model is refitted, and the largest |t| of the side over the columns is kept; returned is
 * the quantile at `level` of those. Variances are pooled over `pool` columns to each side with triangular weights, `dfs` =
 * degrees of freedom a column. t of the side is its projection over √variance; a direction that is the same for every run
 * is left out of the refit, because no permutation changes it. O(resamples · count · runs · directions).
 */
export function criticalMaxT(
  residuals: Float64Array,
  count: number,
  groups: readonly ColumnGroup[],
  dfs: Float64Array,
  options: { level: number; seed: number; resamples: number; pool: number },
): number {
  const n = residuals.length / count;
  const { pool, resamples } = options;
  const total = new Float64Array(count);
  const kernels = groups.map((group) => kernelOf(group, residuals, n, count, total));
  const projectors = columnProjectors(
    kernels.map((kernel) => kernel.residuals),
    n,
  );
  const width = pool + 1;
  // Both times `width`, which saves a division in every column of every resample.
  const whole = {
    squares: triangularSums(total, pool).map((sum) => sum * width),
    df: triangularSums(dfs, pool).map((df) => df * width),
  };
  const random = randomStream(options.seed);
  const order = Int32Array.from({ length: n }, (_, i) => i);
  // Where one design holds for all columns in their order, its projections need no copying.
  const isWhole = kernels.length === 1 && kernels[0].columns.every((column, c) => column === c);
  const side = isWhole ? projectors[0].last : new Float64Array(count);
  const explained = isWhole ? projectors[0].squares : new Float64Array(count);
  const sums = new Float64Array(count + 2 * width + 1);
  const largest = new Float64Array(resamples);
  for (let b = 0; b < resamples; b++) {
    shuffle(order, random);
    for (let k = 0; k < kernels.length; k++) {
      refit(kernels[k], projectors[k], order);
      if (!isWhole) spread(kernels[k], projectors[k], side, explained);
    }
    largest[b] = largestSquare(side, explained, whole, sums, width);
  }
  largest.sort();
  return Math.sqrt(largest[Math.min(resamples - 1, Math.ceil((resamples + 1) * options.level) - 1)]);
}

/** Largest t² of the side over the columns. `sums` is room for `width` columns more at each end; its first ones stay 0. */
function largestSquare(
  side: Float64Array,
  explained: Float64Array,
  whole: { squares: Float64Array; df: Float64Array },
  sums: Float64Array,
  width: number,
): number {
  const { squares, df } = whole;
  const count = squares.length;
  // Second running sums: their second difference over `width` columns is `width` times the triangular sum.
  let running = 0;
  let second = 0;
  for (let k = 0; k < count; k++) {
    running += explained[k];
    second += running;
    sums[k + width + 1] = second;
  }
  for (let k = count + width + 1; k < sums.length; k++) sums[k] = second += running;
  let top = 0;
  for (let k = 0; k < count; k++) {
    const rest = squares[k] - (sums[k + 2 * width] - 2 * sums[k + width] + sums[k]);
    const t = (side[k] * side[k] * df[k]) / Math.max(rest, 1e-12 * squares[k]);
    if (t > top) top = t;
  }
  return top;
}

/** Lays a group out for `refit` and writes its columns' sums of squares, less what no permutation changes, to `total`. */
function kernelOf(
  group: ColumnGroup,
  residuals: Float64Array,
  n: number,
  count: number,
  total: Float64Array,
): Kernel {
  const { basis } = group;
  const columns = Int32Array.from(group.columns);
  const missing = Array.from({ length: n }, (_, r) => r).filter((r) => !group.rows.includes(r));
  const data = new Float64Array(columns.length * n);
  const fixed = basis.subarray(0, n);
  const skip = basis.length > n && missing.length === 0 && fixed.every((x) => Math.abs(x - fixed[0]) < 1e-12);
  columns.forEach((column, c) => {
    let squares = 0;
    let mean = 0;
    for (let r = 0; r < n; r++) {
      const e = residuals[r * count + column];
      data[c * n + r] = e;
      squares += e * e;
      mean += e * fixed[r];
    }
    total[column] = skip ? squares - mean * mean : squares;
  });
  const directions = basis.length / n - (skip ? 1 : 0);
  const passes = Array.from({ length: Math.ceil(directions / LANES) }, () => new Float64Array(LANES * n));
  for (let j = 0; j < directions; j++) {
    const place = passes.length * LANES - directions + j;
    const from = basis.length - (directions - j) * n;
    for (let r = 0; r < n; r++)
      passes[Math.floor(place / LANES)][r * LANES + (place % LANES)] = basis[from + r];
  }
  return { columns, missing, residuals: data, passes };
}

/** Projects permuted residuals on the model: the side's part to `last`, all parts' squares to `squares` of the projector. */
function refit(
  { columns, missing, residuals, passes }: Kernel,
  projector: ColumnProjector,
  order: Int32Array,
): void {
  const { directions, squares } = projector;
  const n = order.length;
  squares.fill(0);
  for (const pass of passes) {
    // Permuting the weights back is the same as permuting the residuals, and moves a handful of numbers only.
    for (let r = 0; r < n; r++) {
      const to = LANES * order[r];
      directions[to] = pass[LANES * r];
      directions[to + 1] = pass[LANES * r + 1];
      directions[to + 2] = pass[LANES * r + 2];
    }
    projector.project();
  }
  for (const run of missing)
    for (let c = 0; c < columns.length; c++) squares[c] += residuals[c * n + order[run]] ** 2;
}

/** Puts the projections of a group's columns at their own places. */
function spread(
  { columns }: Kernel,
  projector: ColumnProjector,
  side: Float64Array,
  explained: Float64Array,
): void {
  const { last, squares } = projector;
  for (let c = 0; c < columns.length; c++) {
    side[columns[c]] = last[c];
    explained[columns[c]] = squares[c];
  }
}
