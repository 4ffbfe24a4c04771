import { curveDeviations } from "@/lib/measure/engine/curve-deviation";
import type { CurveAnomaly, Smoothness } from "@/lib/measure/engine/smoothness-types";
import type { Series } from "@/lib/measure/types";
import { tQuantile } from "@/lib/signal/distributions";
import { standardDeviation, triangularSums } from "@/lib/signal/statistics";

/** Below this the curve builds up boost and takes up the driveline, 1/min over its first point [common practice, no source]. */
const SETTLED_RPM = 800;
/** Nothing smaller is marked: engines ripple by less [common practice, no source]. */
const LEAST_SIZE = 0.01;
/** Level at which a stretch is marked: of clean sides at most about one in a hundred shows a mark. */
const MARK_LEVEL = 0.99;
/** Width over which neighbouring deviations count as one, and over which their scatter is pooled, 1/min. */
const INDEPENDENT_RPM = 150;
const POOL_RPM = 400;
/** The pooled scatter has about this many times the degrees of freedom of one point's. */
const POOLED_DF = 2.5;
const LEAST_RUNS = 3;
/** A mark is left out of the fits with this much around it; marks closer than `NEAR_RPM` belong together, 1/min. */
const MARGIN_RPM = 100;
const NEAR_RPM = 350;
/** Marks smaller than this share of the largest near them are the smoothing's echo of it. */
const ECHO_SHARE = 0.75;
/** Half a step of the curve within this, 1/min, explains deviations up to its size over `STEP_ECHO` [by simulation]. */
const STEP_NEAR_RPM = 250;
const STEP_ECHO = 2;
const MOST_MARKS = 12;

/** A side's deviations from the local fit: of its mean, and of each run. */
interface SideState {
  logs: Float64Array[];
  leftOut: Uint8Array;
  runs: Float64Array[];
  /** Half the step of the curve at each point, and the largest near it. */
  steps: { here: Float64Array; near: Float64Array };
  mean: Float64Array;
  marks: Mark[];
  /** Deviations are judged from here on, `SETTLED_RPM` above the first point that the runs reach; NaN: nowhere. */
  judgedFromRpm: number;
}

interface Mark {
  first: number;
  last: number;
  sign: number;
}

/** What is found on one side. */
export interface FoundOnCurve {
  smoothness: Smoothness | null;
  anomalies: CurveAnomaly[];
}

/**
 * Finds spikes and ripple on the mean curves of the sides. A run's deviation from its local fit is taken point by point, less
 * what a step of the curve explains (a new torque level is neither); the
 * mean of a side's runs is marked where it exceeds both 1 % and t·s/√n, s being the scatter between runs pooled over sides and
 * ± 400 1/min, t Bonferroni's over the independent stretches of the curve: only what repeats over the runs is marked. A marked
 * stretch is left out of the fits and the search goes on. Marks of turning sign and like size close together are a ripple; marks
 * much smaller than one beside them are its echo in the smoothing and are not told.
 * @param sides torque of each usable run on `rpm` (even grid), null = gap
 */
export function findAnomalies(
  rpm: readonly number[],
  sides: Readonly<Record<string, readonly Series[]>>,
  level: number,
): Record<string, FoundOnCurve> {
  const grid = Float64Array.from(rpm);
  const states = new Map<string, SideState>();
  for (const [name, runs] of Object.entries(sides)) {
    if (runs.length < LEAST_RUNS) continue;
    const logs = runs.map((run) =>
      Float64Array.from(run, (nm) => (nm !== null && nm > 0 ? Math.log(nm) : Number.NaN)),
    );
    states.set(name, begun(grid, logs));
  }
  for (let round = 0; round < MOST_MARKS; round++) {
    const scatter = pooledScatter(rpm, [...states.values()]);
    let marked = false;
    for (const [name, state] of states) {
      const mark = strongest(rpm, state, limits(rpm, state, scatter, MARK_LEVEL));
      if (!mark) continue;
      marked = true;
      state.marks.push(mark);
      const margin = Math.round(MARGIN_RPM / stepOf(rpm));
      state.leftOut.fill(1, Math.max(0, mark.first - margin), mark.last + margin + 1);
      states.set(name, refreshed(grid, state));
    }
    if (!marked) break;
  }
  const scatter = pooledScatter(rpm, [...states.values()]);
  return Object.fromEntries(
    Object.keys(sides).map((name): [string, FoundOnCurve] => {
      const state = states.get(name);
      if (!state) return [name, { smoothness: null, anomalies: [] }];
      const pct = (values: Float64Array) =>
        Array.from(values, (x, k) =>
          Number.isNaN(state.mean[k]) || !(rpm[k] >= state.judgedFromRpm) ? null : 100 * x,
        );
      const halfWidth = limits(rpm, state, scatter, level, 0);
      return [
        name,
        {
          smoothness: { rpm: [...rpm], deviation_pct: pct(state.mean), half_width_pct: pct(halfWidth) },
          anomalies: described(rpm, state, limits(rpm, state, scatter, MARK_LEVEL)),
        },
      ];
    }),
  );
}

/** A side with the deviations of its runs and of their mean, before anything is marked. */
function begun(grid: Float64Array, logs: Float64Array[]): SideState {
  const leftOut = new Uint8Array(grid.length);
  const found = curveDeviations(stepOf(grid), logs, leftOut);
  const here = grid.map((_, k) => Math.abs(meanOf(found.map((one) => one.halfStep[k]))) || 0);
  const near = Math.round(STEP_NEAR_RPM / stepOf(grid));
  const steps = {
    here,
    near: here.map((_, k) => Math.max(...here.subarray(Math.max(0, k - near), k + near + 1))),
  };
  const runs = found.map(({ deviation }) => deviation);
  const first = grid.find((_, k) => logs.filter((log) => !Number.isNaN(log[k])).length >= LEAST_RUNS);
  const judgedFromRpm = (first ?? Number.NaN) + SETTLED_RPM;
  return { logs, leftOut, runs, steps, mean: sideMean(runs, steps), marks: [], judgedFromRpm };
}

/** The side after another stretch was left out. Inside one, where a fit lacks points, the deviation stays as it was. */
function refreshed(grid: Float64Array, state: SideState): SideState {
  const runs = curveDeviations(stepOf(grid), state.logs, state.leftOut).map(({ deviation }, r) =>
    deviation.map((x, k) => (Number.isNaN(x) && state.leftOut[k] ? state.runs[r][k] : x)),
  );
  return { ...state, runs, mean: sideMean(runs, state.steps) };
}

/** Mean deviation of the runs, less what a step of the curve at the point or near it explains. */
function sideMean(runs: readonly Float64Array[], { here, near }: SideState["steps"]): Float64Array {
  return here.map((step, k) => {
    const mean = meanOf(runs.map((run) => run[k]));
    const left = Math.max(0, Math.abs(mean) - step);
    return near[k] > STEP_ECHO * left ? 0 * mean : Math.sign(mean) * left;
  });
}

/** Mean of what is there; NaN when fewer than three are. */
function meanOf(values: readonly number[]): number {
  const there = values.filter((x) => !Number.isNaN(x));
  return there.length < LEAST_RUNS ? Number.NaN : there.reduce((sum, x) => sum + x, 0) / there.length;
}

function stepOf(rpm: ArrayLike<number>): number {
  return rpm.length > 1 ? rpm[1] - rpm[0] : INDEPENDENT_RPM;
}

/** Variance between runs at each point, pooled over sides and neighbours, and its degrees of freedom at one point. */
function pooledScatter(
  rpm: readonly number[],
  states: readonly SideState[],
): { variance: Float64Array; df: Float64Array } {
  const squares = new Float64Array(rpm.length);
  const df = new Float64Array(rpm.length);
  for (const { runs } of states) {
    rpm.forEach((_, k) => {
      const own = runs.flatMap((run) => (Number.isNaN(run[k]) ? [] : [run[k]]));
      if (own.length < LEAST_RUNS) return;
      squares[k] += standardDeviation(own) ** 2 * (own.length - 1);
      df[k] += own.length - 1;
    });
  }
  const pool = Math.round(POOL_RPM / stepOf(rpm));
  const pooledDf = triangularSums(df, pool);
  return { variance: triangularSums(squares, pool).map((sum, k) => sum / pooledDf[k]), df };
}

/** What the mean deviation of a side must exceed at each point; NaN where it can't be judged. */
function limits(
  rpm: readonly number[],
  state: SideState,
  { variance, df }: { variance: Float64Array; df: Float64Array },
  level: number,
  least = LEAST_SIZE,
): Float64Array {
  const points = state.mean.filter((x) => !Number.isNaN(x)).length;
  const stretches = Math.max(1, (points * stepOf(rpm)) / INDEPENDENT_RPM);
  const criticals = new Map<number, number>();
  return state.mean.map((mean, k) => {
    if (Number.isNaN(mean)) return Number.NaN;
    const n = state.runs.filter((run) => !Number.isNaN(run[k])).length;
    let critical = criticals.get(df[k]);
    if (critical === undefined) {
      critical = tQuantile(1 - (1 - level) / (2 * stretches), POOLED_DF * df[k]);
      criticals.set(df[k], critical);
    }
    return Math.max(least, critical * Math.sqrt(variance[k] / n));
  });
}

/** The stretch that exceeds its limit most and is not marked yet; it reaches to half of its height. */
function strongest(rpm: readonly number[], state: SideState, limit: Float64Array): Mark | null {
  const { mean, leftOut } = state;
  let best = -1;
  mean.forEach((x, k) => {
    if (leftOut[k] || !(Math.abs(x) > limit[k]) || !(rpm[k] >= state.judgedFromRpm)) return;
    if (best < 0 || Math.abs(x) / limit[k] > Math.abs(mean[best]) / limit[best]) best = k;
  });
  if (best < 0) return null;
  const sign = Math.sign(mean[best]);
  const inside = (k: number) => !leftOut[k] && sign * mean[k] > 0.5 * Math.abs(mean[best]);
  let first = best;
  while (first > 0 && inside(first - 1)) first--;
  let last = best;
  while (last + 1 < mean.length && inside(last + 1)) last++;
  return { first, last, sign };
}

function described(rpm: readonly number[], state: SideState, limit: Float64Array): CurveAnomaly[] {
  const marks = [...state.marks].sort((p, q) => p.first - q.first);
  const groups: Mark[][] = [];
  for (const mark of marks) {
    const group = groups[groups.length - 1];
    if (group && rpm[mark.first] - rpm[group[group.length - 1].last] <= NEAR_RPM) group.push(mark);
    else groups.push([mark]);
  }
  return groups.flatMap((group) => {
    const told = group.map((mark) => anomaly("spike", rpm, state, limit, mark.first, mark.last));
    const largest = Math.max(...told.map(({ size_pct }) => Math.abs(size_pct)));
    const strong = told.filter(({ size_pct }) => Math.abs(size_pct) >= ECHO_SHARE * largest);
    const turning = strong.every(({ size_pct }, i) => i === 0 || size_pct * strong[i - 1].size_pct < 0);
    if (strong.length < 2 || !turning) return strong;
    return [anomaly("ripple", rpm, state, limit, group[0].first, group[group.length - 1].last)];
  });
}

function anomaly(
  code: CurveAnomaly["code"],
  rpm: readonly number[],
  { mean, runs }: SideState,
  limit: Float64Array,
  first: number,
  last: number,
): CurveAnomaly {
  let top = first;
  for (let k = first; k <= last; k++) if (!(Math.abs(mean[k]) <= Math.abs(mean[top]))) top = k;
  const there = runs.flatMap((run) => (Number.isNaN(run[top]) ? [] : [run[top]]));
  return {
    code,
    from_rpm: rpm[first],
    to_rpm: rpm[last],
    size_pct: 100 * Math.expm1(mean[top]),
    limit_pct: 100 * limit[top],
    runs: { showing: there.filter((x) => x / mean[top] > 0.5).length, of: there.length },
  };
}
