import type { ComparedRun } from "@/lib/compare/band/run-design";
import { findTwins } from "@/lib/compare/twins";
import { InvalidInputError } from "@/lib/errors";
import type { RepeatabilityResult } from "@/lib/measure/types";
import { leastSquares } from "@/lib/signal/least-squares";

/** A usable pull: torque on the common grid, N·m, null = gap. */
export interface RepeatedPull extends ComparedRun {
  engineNm: readonly (number | null)[];
}

/** Width over which torque is averaged for the scatter of a range, 1/min: about that of a verdict that matters (our choice). */
const RANGE_RPM = 1000;

/** Sums of squares with their degrees of freedom, gathered over columns. */
interface Pool {
  squares: number;
  df: number;
}

/** The columns mean, side, leg and order of these runs, without those that do not vary or depend on the ones before. */
function designOf(runs: readonly ComparedRun[]): { matrix: Float64Array; columns: number } {
  const wanted = [
    runs.map(() => 1),
    runs.map((run) => (run.side === runs[0].side ? 0 : 1)),
    runs.map((run) => (run.leg === "out" ? 0.5 : run.leg === "back" ? -0.5 : 0)),
    runs.map((run, r) => (run.order ?? r) - (runs.length - 1) / 2),
  ];
  let kept: number[][] = [];
  for (const column of wanted) {
    const tried = [...kept, column];
    const matrix = Float64Array.from(runs.flatMap((_, r) => tried.map((values) => values[r])));
    try {
      leastSquares(matrix, new Float64Array(runs.length), tried.length);
      kept = tried;
    } catch (error) {
      if (!(error instanceof InvalidInputError)) throw error;
    }
  }
  const matrix = Float64Array.from(runs.flatMap((_, r) => kept.map((values) => values[r])));
  return { matrix, columns: kept.length };
}

/** The design of whichever runs have a value; the same runs at the next engine speed share it. */
function designsOf(
  runs: readonly ComparedRun[],
): (present: readonly number[]) => ReturnType<typeof designOf> {
  const known = new Map<string, ReturnType<typeof designOf>>();
  return (present) => {
    const key = present.join();
    const design = known.get(key) ?? designOf(present.map((r) => runs[r]));
    known.set(key, design);
    return design;
  };
}

/** Adds what is left of `values` (one a run, NaN = gap) after the model to the pool; columns with too few runs add nothing. */
function addResiduals(pool: Pool, design: ReturnType<typeof designsOf>, values: readonly number[]): void {
  const present = values.flatMap((value, r) => (Number.isNaN(value) ? [] : [r]));
  if (present.length < 2) return;
  const { matrix, columns } = design(present);
  if (present.length <= columns) return;
  const fit = leastSquares(
    matrix,
    Float64Array.from(present, (r) => values[r]),
    columns,
  );
  pool.squares += fit.residualSd ** 2 * fit.df;
  pool.df += fit.df;
}

const sdPct = ({ squares, df }: Pool): number | null =>
  df > 0 ? 100 * Math.expm1(Math.sqrt(squares / df)) : null;

function closureOf(runs: readonly ComparedRun[], logs: readonly (readonly number[])[]) {
  const twins = findTwins(runs, (r) => logs[r]);
  const closures = twins.flatMap((twin) => (twin.closure_pct === null ? [] : [twin.closure_pct]));
  if (closures.length === 0) return { twins: twins.length, rms_pct: null, largest_pct: null };
  return {
    twins: twins.length,
    rms_pct: Math.sqrt(closures.reduce((sum, x) => sum + x * x, 0) / closures.length),
    largest_pct: Math.max(...closures.map(Math.abs)),
  };
}

function ofRoadDay(rpm: readonly number[], pulls: readonly RepeatedPull[]): RepeatabilityResult {
  const logs = pulls.map((pull) =>
    pull.engineNm.map((nm) => (nm !== null && nm > 0 ? Math.log(nm) : Number.NaN)),
  );
  const design = designsOf(pulls);
  const point: Pool = { squares: 0, df: 0 };
  rpm.forEach((_, k) => {
    addResiduals(
      point,
      design,
      logs.map((log) => log[k]),
    );
  });
  const range: Pool = { squares: 0, df: 0 };
  const width = rpm.length > 1 ? Math.max(1, Math.round(RANGE_RPM / (rpm[1] - rpm[0]))) : 1;
  for (let from = 0; from + width <= rpm.length; from += width) {
    // A mean over part of the range would differ by which part it is, so a gap anywhere leaves the run out here.
    const means = logs.map((log) => log.slice(from, from + width).reduce((sum, x) => sum + x, 0) / width);
    addResiduals(range, design, means);
  }
  const df = Math.max(0, pulls.length - design(pulls.map((_, r) => r)).columns);
  return {
    road_day: pulls[0].roadDay,
    runs: pulls.length,
    df,
    sd_point_pct: df > 0 ? sdPct(point) : null,
    sd_range_pct: df > 0 ? sdPct(range) : null,
    range_rpm: RANGE_RPM,
    closure: closureOf(pulls, logs),
  };
}

/**
 * Repeatability of each road day: standard deviation between runs of log torque after mean, side, leg and drift, pooled over
 * engine speeds (measurement.md 6.5). Neighbouring speeds are nearly the same witness, so the degrees of freedom stay those of
 * one speed. A day with no more runs than unknowns has df 0 and null standard deviations.
 * @param rpm common grid with even steps, 1/min
 * @param pulls usable pulls of all sides; an order that is not known counts as the place in the list
 */
export function repeatability(rpm: readonly number[], pulls: readonly RepeatedPull[]): RepeatabilityResult[] {
  const days = [...new Set(pulls.map((pull) => pull.roadDay))];
  return days.map((day) =>
    ofRoadDay(
      rpm,
      pulls.filter((pull) => pull.roadDay === day),
    ),
  );
}
