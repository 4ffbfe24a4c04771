import { type ColumnGroup, criticalMaxT } from "@/lib/compare/band/permutation-max-t";
import { rowsOf } from "@/lib/compare/band/run-design";
import { tQuantile } from "@/lib/signal/distributions";
import { leastSquares } from "@/lib/signal/least-squares";
import { triangularSums } from "@/lib/signal/statistics";

/** Effect of the side at each column with its standard error and the critical value of the simultaneous band. */
export interface DeltaBand {
  effect: Float64Array;
  standardError: Float64Array;
  /** Degrees of freedom: of the column with fewest runs for Bonferroni's t, else of the middle column. */
  df: number;
  critical: number;
  /** Critical value at each column; for Bonferroni's t that of its own degrees of freedom, none above `critical`. */
  criticalAt: Float64Array;
  method: "permutation max-t" | "Bonferroni t";
  /** Coefficient of another column of the design, e.g. the drift per run; NaN where it is not in the model. */
  orderEffect: Float64Array;
}

/** Columns present in the same runs, with what their common design gives. */
interface Pattern extends ColumnGroup {
  /** Weights over all runs whose product with the values is the coefficient. */
  side: Float64Array;
  order: Float64Array | null;
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
  const effect = new Float64Array(count);
  const standardError = new Float64Array(count);
  const orderEffect = new Float64Array(count).fill(Number.NaN);
  const residuals = new Float64Array(n * count).fill(Number.NaN);
  const squares = new Float64Array(count);
  const dfs = new Float64Array(count);
  const patterns = findPatterns(values, count).map(({ rows, columns: members }) => ({
    ...fitPattern(design, n, columns, side, order, rows),
    columns: members,
  }));
  for (const pattern of patterns) {
    const scale = Math.sqrt(pattern.rows.length / pattern.df);
    for (const k of pattern.columns) {
      const y = Float64Array.from({ length: n }, (_, r) => values[r * count + k] || 0);
      effect[k] = dot(pattern.side, y, 0);
      if (pattern.order) orderEffect[k] = dot(pattern.order, y, 0);
      for (let j = 0; j < columns; j++) {
        const along = dot(y, pattern.basis, j * n);
        for (let r = 0; r < n; r++) y[r] -= along * pattern.basis[j * n + r];
      }
      squares[k] = dot(y, y, 0);
      dfs[k] = pattern.df;
      for (const r of pattern.rows) residuals[r * count + k] = y[r] * scale;
    }
  }
  const df = options.small ? Math.min(...dfs) : dfs.slice().sort()[count >> 1];
  const pooledSquares = triangularSums(squares, options.pool);
  const pooledDf = triangularSums(dfs, options.pool);
  for (const { columns: members, sideVariance } of patterns)
    for (const k of members) standardError[k] = Math.sqrt((pooledSquares[k] / pooledDf[k]) * sideVariance);
  const bonferroni = (own: number) => tQuantile(1 - (1 - options.level) / (2 * count), own);
  const critical = options.small
    ? bonferroni(df)
    : criticalMaxT(fillGaps(residuals, n, count), count, patterns, dfs, options);
  const criticalAt = new Float64Array(count).fill(critical);
  for (const pattern of options.small ? patterns : []) {
    if (pattern.df === df) continue;
    const own = bonferroni(pattern.df);
    for (const k of pattern.columns) criticalAt[k] = own;
  }
  return {
    effect,
    standardError,
    df,
    critical,
    criticalAt,
    method: options.small ? "Bonferroni t" : "permutation max-t",
    orderEffect,
  };
}

/** "up to " in front of a critical value that not every column has. */
export function upTo({ critical, criticalAt }: DeltaBand): string {
  return criticalAt.some((own) => own < critical) ? "up to " : "";
}

/** Σ a[i]·b[from + i] over the length of a. */
function dot(a: Float64Array, b: Float64Array, from: number): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[from + i];
  return sum;
}

/** Groups the columns by the runs that have a value there. */
function findPatterns(values: Float64Array, count: number): { rows: number[]; columns: number[] }[] {
  const patterns = new Map<string, { rows: number[]; columns: number[] }>();
  for (let k = 0; k < count; k++) {
    const rows: number[] = [];
    for (let r = 0; r * count < values.length; r++) if (!Number.isNaN(values[r * count + k])) rows.push(r);
    const found = patterns.get(rows.join());
    if (found) found.columns.push(k);
    else patterns.set(rows.join(), { rows, columns: [k] });
  }
  return [...patterns.values()];
}

function fitPattern(
  design: Float64Array,
  n: number,
  columns: number,
  side: number,
  order: number | null,
  rows: readonly number[],
): Omit<Pattern, "columns"> {
  const x = rowsOf(design, columns, rows);
  // Refuses a column that depends on the others.
  const { unscaledCovariance } = leastSquares(x, new Float64Array(rows.length), columns);
  const contrast = (column: number) => {
    const weights = new Float64Array(n);
    rows.forEach((r, i) => {
      for (let j = 0; j < columns; j++)
        weights[r] += unscaledCovariance[column * columns + j] * x[i * columns + j];
    });
    return weights;
  };
  const sideLast = Array.from({ length: columns }, (_, j) => j).filter((j) => j !== side);
  const basis = new Float64Array(n * columns);
  [...sideLast, side].forEach((column, j) => {
    for (const r of rows) basis[j * n + r] = design[r * columns + column];
  });
  orthonormalise(basis, n);
  return {
    rows: [...rows],
    basis,
    side: contrast(side),
    order: order === null ? null : contrast(order),
    sideVariance: unscaledCovariance[side * columns + side],
    df: rows.length - columns,
  };
}

/** Modified Gram-Schmidt in place, twice: the designs here have a handful of well-scaled columns. */
function orthonormalise(directions: Float64Array, n: number): void {
  for (let from = 0; from < directions.length; from += n) {
    const own = directions.subarray(from, from + n);
    for (let pass = 0; pass < 2; pass++) {
      for (let before = 0; before < from; before += n) {
        const along = dot(own, directions, before);
        for (let i = 0; i < n; i++) own[i] -= along * directions[before + i];
      }
    }
    const norm = Math.sqrt(dot(own, own, 0));
    for (let i = 0; i < n; i++) own[i] /= norm;
  }
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
