import { type ComparedRun, carriedBy, type RunDesign, rowsOf } from "@/lib/compare/band/run-design";
import { tQuantile } from "@/lib/signal/distributions";
import { leastSquares } from "@/lib/signal/least-squares";
import { mean } from "@/lib/signal/statistics";

/** Fewer runs a side carry no interval. */
export const LEAST_RUNS = 3;

/** B − A of one figure a run. */
export interface SideEffect {
  effect: number;
  /** Half-width of its own interval; null when there are too few runs for one. */
  half: number | null;
  /** Smallest difference that these runs show with 80 % chance; null as `half`. */
  resolvable: number | null;
  nA: number;
  nB: number;
}

/**
 * Difference of the sides in a figure that each run has once (a peak, a mean over a range), by the same linear model as the
 * curve's; its interval stands alone. Without enough runs it is the difference of the means. Null values are left out; null
 * when a side has none.
 */
export function sideEffect(
  runs: readonly Pick<ComparedRun, "side">[],
  values: readonly (number | null)[],
  design: Pick<RunDesign, "matrix" | "columns" | "side"> | null,
  settings: { a: string; b: string; level: number },
): SideEffect | null {
  const rows = values.flatMap((value, r) => (value === null ? [] : [r]));
  const of = (side: string) => rows.filter((r) => runs[r].side === side).map((r) => values[r] ?? 0);
  const [a, b] = [of(settings.a), of(settings.b)];
  const counts = { nA: a.length, nB: b.length };
  if (a.length === 0 || b.length === 0) return null;
  if (!design || Math.min(a.length, b.length) < LEAST_RUNS || !carriedBy(design)(rows)) {
    return { effect: mean(b) - mean(a), half: null, resolvable: null, ...counts };
  }
  const fit = leastSquares(
    rowsOf(design.matrix, design.columns, rows),
    Float64Array.from(rows, (r) => values[r] ?? 0),
    design.columns,
  );
  const critical = tQuantile(0.5 + settings.level / 2, fit.df);
  const se = fit.standardErrors[design.side];
  return {
    effect: fit.coefficients[design.side],
    half: critical * se,
    resolvable: (critical + tQuantile(0.8, fit.df)) * se,
    ...counts,
  };
}
