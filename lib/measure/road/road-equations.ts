import type { HeightProfile, SparseRow } from "@/lib/measure/road/height-profile";
import type { RoadObservations, RoadRun } from "@/lib/measure/road/road-observations";
import { addRow, type NormalEquations } from "@/lib/signal/normal-equations";
import { median } from "@/lib/signal/statistics";
import { STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

/** Priors, wide enough to lose against any real coast-down: passenger cars [common practice, no source]. Mean and deviation. */
export const ROAD_PRIOR = {
  rolling: [0.012, 0.006],
  f1NPerMps: [0.4, 0.4],
  dragAreaHalfDensity: [0.42, 0.25],
  windMps: [0, 3],
  windBetweenRunsMps: 0.6,
  pitch: [0.05, 0.1],
  biasMps2: 0.4,
  tilt: 0.006,
} as const;

/** Scatter of a gust within a coast-down block, m/s, and the drag per speed that turns it into force. */
export const GUST_MPS = 0.3;

/** The unknowns in order: f0, f1, f2, wind, wind of each run, pitch, accelerometer bias of each run, resistance beyond the speeds coasted, then heights. */
export interface RoadLayout {
  size: number;
  wind: number;
  runWind: (run: number) => number;
  pitch: number;
  bias: (run: number) => number;
  beyond: number;
}

/** Places of the unknowns for `runs` runs and `heights` height coefficients. */
export function roadLayout(runs: number, heights: number): RoadLayout {
  return {
    size: 6 + 2 * runs + heights,
    wind: 3,
    runWind: (r) => 4 + r,
    pitch: 4 + runs,
    bias: (r) => 5 + runs + r,
    beyond: 5 + 2 * runs,
  };
}

/** How far each kind of reading scatters, as a factor on what is assumed of it. */
export interface Scatter {
  coast: number;
  tilt: number;
  climb: number;
}

/** Everything the equations are made of, with the rows of the height profile worked out once. */
export interface RoadProblem {
  layout: RoadLayout;
  runs: readonly RoadRun[];
  observations: RoadObservations;
  slopes: { coasts: SparseRow[]; tilts: SparseRow[]; climbs: SparseRow[] };
  /** Mean test mass of the runs: f0 holds for it and goes with each run's mass. */
  massKg: number;
}

/** Works out the rows of the height profile for every reading. */
export function heightRows(profile: HeightProfile, observations: RoadObservations): RoadProblem["slopes"] {
  return {
    coasts: observations.coasts.map((o) => profile.slopeRow(o.run, o.positionM)),
    tilts: observations.tilts.map((o) => profile.slopeRow(o.run, o.positionM)),
    climbs: observations.climbs.map((o) => profile.climbRow(o.run, o.fromM, o.toM)),
  };
}

/** Adds the priors of all unknowns but the heights. */
export function addPriors(data: NormalEquations, { layout, runs, massKg }: RoadProblem): void {
  const weightN = massKg * STANDARD_GRAVITY_MPS2;
  const prior = (index: number, mean: number, sd: number) => addRow(data, [index], [1], mean, 1 / sd ** 2);
  prior(0, ROAD_PRIOR.rolling[0] * weightN, ROAD_PRIOR.rolling[1] * weightN);
  prior(1, ROAD_PRIOR.f1NPerMps[0], ROAD_PRIOR.f1NPerMps[1]);
  prior(2, ROAD_PRIOR.dragAreaHalfDensity[0], ROAD_PRIOR.dragAreaHalfDensity[1]);
  prior(layout.wind, ROAD_PRIOR.windMps[0], ROAD_PRIOR.windMps[1]);
  prior(layout.beyond, 0, 1);
  prior(layout.pitch, ROAD_PRIOR.pitch[0], ROAD_PRIOR.pitch[1]);
  runs.forEach((_, r) => {
    prior(layout.runWind(r), 0, ROAD_PRIOR.windBetweenRunsMps);
    prior(layout.bias(r), 0, ROAD_PRIOR.biasMps2);
  });
}

/** Gradient of the resistance of one run with respect to the unknowns; `slope` is its row of the height profile. */
export function resistanceRow(
  problem: RoadProblem,
  r: number,
  speedMps: number,
  slope: SparseRow,
  x: Float64Array,
): SparseRow {
  const { layout, runs, massKg, observations } = problem;
  const { track, densityRatio, massKg: own } = runs[r];
  const air = speedMps - track.direction * (x[layout.wind] + x[layout.runWind(r)]);
  const perWind = -2 * track.direction * x[2] * densityRatio * Math.abs(air);
  return {
    indices: [0, 1, 2, layout.wind, layout.runWind(r), layout.beyond, ...slope.indices],
    values: [
      own / massKg,
      speedMps,
      densityRatio * air * Math.abs(air),
      perWind,
      perWind,
      beyondN(observations, speedMps),
      ...slope.values.map((value) => value * own * STANDARD_GRAVITY_MPS2),
    ],
  };
}

/** How far resistance may depart from the fitted curve outside the speeds that were coasted, N: a tenth of what it grows by. */
function beyondN({ windows }: RoadObservations, speedMps: number): number {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const window of windows) {
    low = Math.min(low, window.lowMps);
    high = Math.max(high, window.highMps);
  }
  const edge = Math.min(high, Math.max(low, speedMps));
  if (windows.length === 0 || edge === speedMps) return 0;
  const grown =
    ROAD_PRIOR.f1NPerMps[0] * (speedMps - edge) +
    ROAD_PRIOR.dragAreaHalfDensity[0] * (speedMps ** 2 - edge ** 2);
  return 0.1 * Math.abs(grown);
}

/** Adds every reading with its weight; returns the factors by which each kind scatters more than it was weighted for. */
export function addObservations(
  data: NormalEquations,
  problem: RoadProblem,
  x: Float64Array,
  scatter: Scatter,
): Scatter {
  const { layout, runs, observations, slopes } = problem;
  const standardised = { coast: [] as number[], tilt: [] as number[], climb: [] as number[] };
  const add = (
    list: number[],
    { indices, values }: SparseRow,
    target: number,
    variance: number,
    constant: number,
  ) => {
    let predicted = constant;
    for (let k = 0; k < indices.length; k++) predicted += values[k] * x[indices[k]];
    const standard = (target - predicted) / Math.sqrt(variance);
    list.push(standard);
    const huber = Math.min(1, 2.5 / Math.max(1e-9, Math.abs(standard)));
    addRow(data, indices, values, target - constant, huber / variance);
  };
  observations.coasts.forEach((o, k) => {
    const row = resistanceRow(problem, o.run, o.speedMps, slopes.coasts[k], x);
    // The wind enters squared: its row is the tangent, the constant that the tangent misses goes to the other side.
    const tangent = -row.values[3] * (x[layout.wind] + x[layout.runWind(o.run)]);
    const gustN = 2 * ROAD_PRIOR.dragAreaHalfDensity[0] * o.speedMps * GUST_MPS;
    const { neutralMassKg } = runs[o.run];
    const variance = scatter.coast ** 2 * (neutralMassKg ** 2 * o.accelerationVariance + gustN ** 2);
    add(standardised.coast, row, -neutralMassKg * o.accelerationMps2, variance, tangent);
  });
  observations.tilts.forEach((o, k) => {
    const { indices, values } = slopes.tilts[k];
    const row = {
      indices: [layout.pitch, layout.bias(o.run), ...indices],
      values: [o.accelerationMps2, 1, ...values.map((v) => v * STANDARD_GRAVITY_MPS2)],
    };
    add(
      standardised.tilt,
      row,
      o.readingMps2 - o.accelerationMps2,
      (scatter.tilt * 0.02) ** 2 / o.seconds,
      0,
    );
  });
  observations.climbs.forEach((o, k) => {
    add(standardised.climb, slopes.climbs[k], o.climbM, (scatter.climb * 0.2) ** 2, 0);
  });
  return {
    coast: excessScatter(standardised.coast),
    tilt: excessScatter(standardised.tilt),
    climb: excessScatter(standardised.climb),
  };
}

/** Robust scatter of standardised residuals, widened where neighbours agree too well to be independent; 1 below 12 readings. */
function excessScatter(standardised: readonly number[]): number {
  if (standardised.length < 12) return 1;
  const scale = 1.4826 * median(standardised.map(Math.abs));
  let product = 0;
  let square = 0;
  for (let i = 1; i < standardised.length; i++) {
    const a = Math.max(-3 * scale, Math.min(3 * scale, standardised[i - 1]));
    const b = Math.max(-3 * scale, Math.min(3 * scale, standardised[i]));
    product += a * b;
    square += b * b;
  }
  const correlation = Math.min(0.9, Math.max(0, square > 0 ? product / square : 0));
  return Math.min(20, Math.max(0.05, scale * Math.sqrt((1 + correlation) / (1 - correlation))));
}
