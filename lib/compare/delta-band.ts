import { tQuantile } from "@/lib/signal/distributions";
import { leastSquares } from "@/lib/signal/least-squares";
import { randomStream, shuffle } from "@/lib/signal/random";

/** Effect of the side at each column with its standard error and the critical value of the simultaneous band. */
export interface DeltaBand {
  effect: Float64Array;
  standardError: Float64Array;
  df: number;
  critical: number;
  method: "permutation max-t" | "Bonferroni t";
  /** Coefficient of another column of the design, e.g. the drift per run; NaN where it is not in the model. */
  orderEffect: Float64Array;
}

interface ColumnFit {
  rows: number[];
  /** Row weights whose product with the values is the side's coefficient. */
  contrast: Float64Array;
  /** Orthonormal basis of the design's columns, rows × columns. */
  basis: Float64Array;
  columns: number;
  sideVariance: number;
  df: number;
}

export interface BandOptions {
  level: number;
  seed: number;
  resamples: number;
  /** Columns to each side whose residual variance is pooled with a column's own (triangular weights). */
  pool: number;
  /** True when an arm is too small for the permutation to hold its level (three runs): Bonferroni instead. */
  small: boolean;
}

/**
 * Linear model at every column of `values` (runs × `count`, row-major, NaN = gap): values = design + error. The band is
 * effect ± critical · standard error, simultaneous over all columns.
 * Permutation max-t: rows of the full model's residuals, scaled by √(n/(n−p)), are permuted as wholes, refitted, and the
 * largest |t| of the side over all columns is kept; the critical value is its quantile (Freedman and Lane 1983 resample
 * residuals of the reduced model; with the full model as here the level held in our own study, see measurement notes).
 * A gap in a run's residual row is filled from its nearest neighbours for resampling only.
 */
export function deltaBand(
  values: Float64Array,
  count: number,
  design: Float64Array,
  columns: number,
  side: number,
  order: number | null,
  options: BandOptions,
): DeltaBand {
  const n = values.length / count;
  const patterns = new Map<string, ColumnFit>();
  const fits: ColumnFit[] = [];
  const effect = new Float64Array(count);
  const standardError = new Float64Array(count);
  const orderEffect = new Float64Array(count).fill(Number.NaN);
  const residuals = new Float64Array(n * count).fill(Number.NaN);
  const squares = new Float64Array(count);
  let df = Number.POSITIVE_INFINITY;
  for (let k = 0; k < count; k++) {
    const rows: number[] = [];
    for (let r = 0; r < n; r++) if (!Number.isNaN(values[r * count + k])) rows.push(r);
    const key = rows.join();
    let fit = patterns.get(key);
    if (!fit) {
      fit = columnFit(design, columns, side, rows);
      patterns.set(key, fit);
    }
    fits.push(fit);
    df = Math.min(df, fit.df);
    const y = Float64Array.from(rows, (r) => values[r * count + k]);
    const x = Float64Array.from(rows.flatMap((r) => [...design.subarray(r * columns, (r + 1) * columns)]));
    const solved = leastSquares(x, y, columns);
    effect[k] = solved.coefficients[side];
    squares[k] = solved.residualSd ** 2 * fit.df;
    if (order !== null) orderEffect[k] = solved.coefficients[order];
    const scale = Math.sqrt(rows.length / fit.df);
    rows.forEach((r, i) => {
      residuals[r * count + k] = solved.residuals[i] * scale;
    });
  }
  const dfs = Float64Array.from(fits, (fit) => fit.df);
  const variance = pooledVariance(squares, dfs, options.pool);
  for (let k = 0; k < count; k++) standardError[k] = Math.sqrt(variance[k] * fits[k].sideVariance);
  const critical = options.small
    ? tQuantile(1 - (1 - options.level) / (2 * count), df)
    : permutationCritical(fillGaps(residuals, n, count), n, count, fits, options);
  return {
    effect,
    standardError,
    df,
    critical,
    method: options.small ? "Bonferroni t" : "permutation max-t",
    orderEffect,
  };
}

/** Residual variance a column: sums of squares over degrees of freedom, both pooled with triangular weights over neighbours. */
function pooledVariance(squares: Float64Array, dfs: Float64Array, pool: number): Float64Array {
  return squares.map((_, k) => {
    let top = 0;
    let bottom = 0;
    for (let j = Math.max(0, k - pool); j <= Math.min(squares.length - 1, k + pool); j++) {
      const weight = 1 - Math.abs(j - k) / (pool + 1);
      top += weight * squares[j];
      bottom += weight * dfs[j];
    }
    return top / bottom;
  });
}

function columnFit(design: Float64Array, columns: number, side: number, rows: readonly number[]): ColumnFit {
  const x = Float64Array.from(rows.flatMap((r) => [...design.subarray(r * columns, (r + 1) * columns)]));
  const { unscaledCovariance } = leastSquares(x, new Float64Array(rows.length), columns);
  const contrast = new Float64Array(rows.length);
  for (let i = 0; i < rows.length; i++) {
    for (let j = 0; j < columns; j++)
      contrast[i] += unscaledCovariance[side * columns + j] * x[i * columns + j];
  }
  return {
    rows: [...rows],
    contrast,
    basis: orthonormal(x, rows.length, columns),
    columns,
    sideVariance: unscaledCovariance[side * columns + side],
    df: rows.length - columns,
  };
}

/** Modified Gram-Schmidt, twice: the designs here have a handful of well-scaled columns. */
function orthonormal(x: Float64Array, rows: number, columns: number): Float64Array {
  const q = x.slice();
  for (let j = 0; j < columns; j++) {
    for (let pass = 0; pass < 2; pass++) {
      for (let k = 0; k < j; k++) {
        let dot = 0;
        for (let i = 0; i < rows; i++) dot += q[i * columns + j] * q[i * columns + k];
        for (let i = 0; i < rows; i++) q[i * columns + j] -= dot * q[i * columns + k];
      }
    }
    let norm = 0;
    for (let i = 0; i < rows; i++) norm += q[i * columns + j] ** 2;
    norm = Math.sqrt(norm);
    for (let i = 0; i < rows; i++) q[i * columns + j] /= norm;
  }
  return q;
}

function fillGaps(residuals: Float64Array, n: number, count: number): Float64Array {
  const out = residuals.slice();
  for (let r = 0; r < n; r++) {
    const known: number[] = [];
    for (let k = 0; k < count; k++) if (!Number.isNaN(residuals[r * count + k])) known.push(k);
    for (let k = 0; k < count; k++) {
      if (!Number.isNaN(out[r * count + k])) continue;
      const after = known.find((j) => j > k);
      const before = known.findLast((j) => j < k);
      const a = before === undefined ? after : before;
      const b = after === undefined ? before : after;
      if (a === undefined || b === undefined) out[r * count + k] = 0;
      else {
        const u = a === b ? 0 : (k - a) / (b - a);
        out[r * count + k] = (1 - u) * residuals[r * count + a] + u * residuals[r * count + b];
      }
    }
  }
  return out;
}

function permutationCritical(
  residuals: Float64Array,
  n: number,
  count: number,
  fits: readonly ColumnFit[],
  options: BandOptions,
): number {
  const random = randomStream(options.seed);
  const order = Int32Array.from({ length: n }, (_, i) => i);
  const largest = new Float64Array(options.resamples);
  const permuted = new Float64Array(n * count);
  const effects = new Float64Array(count);
  const squares = new Float64Array(count);
  const dfs = Float64Array.from(fits, (fit) => fit.df);
  for (let b = 0; b < options.resamples; b++) {
    shuffle(order, random);
    for (let r = 0; r < n; r++)
      permuted.set(residuals.subarray(order[r] * count, (order[r] + 1) * count), r * count);
    for (let k = 0; k < count; k++) {
      const { rows, contrast, basis, columns } = fits[k];
      let effect = 0;
      let square = 0;
      for (let i = 0; i < rows.length; i++) {
        const e = permuted[rows[i] * count + k];
        effect += contrast[i] * e;
        square += e * e;
      }
      for (let j = 0; j < columns; j++) {
        let dot = 0;
        for (let i = 0; i < rows.length; i++) dot += basis[i * columns + j] * permuted[rows[i] * count + k];
        square -= dot * dot;
      }
      effects[k] = effect;
      squares[k] = Math.max(0, square);
    }
    const variance = pooledVariance(squares, dfs, options.pool);
    let top = 0;
    for (let k = 0; k < count; k++) {
      const t = Math.abs(effects[k]) / Math.sqrt(Math.max(1e-300, variance[k] * fits[k].sideVariance));
      if (t > top) top = t;
    }
    largest[b] = top;
  }
  largest.sort();
  return largest[Math.min(options.resamples - 1, Math.ceil((options.resamples + 1) * options.level) - 1)];
}
