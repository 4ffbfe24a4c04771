import { type HeightProfile, heightProfiles } from "@/lib/measure/height-profile";
import type { RoadObservations, RoadRun } from "@/lib/measure/road-observations";
import {
  addRow,
  type NormalEquations,
  type NormalSolution,
  normalEquations,
  solveNormal,
} from "@/lib/signal/normal-equations";
import { median } from "@/lib/signal/statistics";
import { STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

/** What the road and the air do to the car on one road day, with the joint uncertainty of all of it. */
export interface RoadDay {
  f0N: number;
  f1NPerMps: number;
  f2NPerMps2: number;
  /** Wind along the strip's axis per run, m/s, positive with the out direction. */
  windMps: number[];
  /** Resistance at a speed and position in one run, wind and slope of that run in it, N. */
  resistanceN: (run: number, speedMps: number, positionM: number) => number;
  /** Standard uncertainty of the mean resistance over some points of one run, N. */
  uncertaintyN: (run: number, points: readonly { speedMps: number; positionM: number }[]) => number;
  coastRuns: number;
  slopeFrom: ("accelerometer" | "altitude" | "coast-downs")[];
}

/** Priors, wide enough to lose against any real coast-down: passenger cars [common practice, no source]. */
const PRIOR = {
  rolling: [0.012, 0.006],
  f1NPerMps: [0.4, 0.4],
  dragAreaHalfDensity: [0.42, 0.25],
  windMps: [0, 3],
  windBetweenRunsMps: 0.6,
  pitch: [0.05, 0.1],
  biasMps2: 0.4,
  tilt: 0.006,
} as const;

interface Layout {
  size: number;
  wind: number;
  runWind: (run: number) => number;
  pitch: number;
  bias: (run: number) => number;
}

/**
 * Estimates resistance, wind and slope of a road day from all its coast-downs at once:
 * −a·(m + ΣJw/r²) = f0 + f1·v + f2·(ρ/ρ̄)·(v − d·w)|v − d·w| + m·g·d·θ(s), with one wind a run around the day's mean, and the
 * slope θ from whatever tells of it: coast-downs in both directions over the same road, accelerometer readings
 * (bias a run + (1 + pitch)·a + d·g·θ), altitude differences. Weighted least squares with priors; the scatter of each kind of
 * reading is estimated from its own residuals, the roughness of the road by marginal likelihood. Gauss-Newton in the wind.
 */
export function estimateRoadDay(
  runs: readonly RoadRun[],
  observations: RoadObservations,
  massKg: number,
  neutralMassKg: number,
): RoadDay {
  const n = runs.length;
  const profiles = heightProfiles(runs, observations);
  const base = 4 + n + 1 + n;
  const layout: Layout = {
    size: base + profiles.size,
    wind: 3,
    runWind: (r) => 4 + r,
    pitch: 4 + n,
    bias: (r) => 5 + n + r,
  };
  const weight = massKg * STANDARD_GRAVITY_MPS2;
  let x = new Float64Array(layout.size) as Float64Array;
  x.set([PRIOR.rolling[0] * weight, PRIOR.f1NPerMps[0], PRIOR.dragAreaHalfDensity[0]]);
  const scatter = { coast: 1, tilt: 1, climb: 1 };
  let roughness = 1e-8;
  let solution: NormalSolution | null = null;
  for (let pass = 0; pass < 5; pass++) {
    const data = normalEquations(layout.size);
    addPriors(data, layout, n, weight);
    const residuals = addObservations(
      data,
      layout,
      profiles,
      base,
      runs,
      observations,
      x,
      scatter,
      weight,
      neutralMassKg,
    );
    if (pass === 2) roughness = chooseRoughness(data, profiles, base);
    profiles.addPenalty(data, base, roughness, PRIOR.tilt);
    solution = solveNormal(data);
    x = solution.x;
    if (pass >= 1) {
      scatter.coast *= groupScatter(residuals.coasts);
      scatter.tilt *= groupScatter(residuals.tilts);
      scatter.climb *= groupScatter(residuals.climbs);
    }
  }
  const { covariance } = solution as NormalSolution;
  const windMps = runs.map((_, r) => x[layout.wind] + x[layout.runWind(r)]);
  const gradient = (r: number, v: number, s: number): [number[], number[]] =>
    resistanceRow(layout, profiles, base, runs[r], r, v, s, x, weight);
  return {
    f0N: x[0],
    f1NPerMps: x[1],
    f2NPerMps2: x[2],
    windMps,
    resistanceN: (r, v, s) => {
      const { densityRatio, track } = runs[r];
      const air = v - track.direction * windMps[r];
      const [indices, values] = profiles.slopeRow(base, r, s);
      const slope = indices.reduce((sum, index, k) => sum + values[k] * x[index], 0);
      return x[0] + x[1] * v + x[2] * densityRatio * air * Math.abs(air) + weight * slope;
    },
    uncertaintyN: (r, points) => {
      const mean = new Float64Array(layout.size);
      for (const { speedMps, positionM } of points) {
        const [indices, values] = gradient(r, speedMps, positionM);
        indices.forEach((index, k) => {
          mean[index] += values[k] / points.length;
        });
      }
      let variance = 0;
      for (let i = 0; i < layout.size; i++) {
        if (mean[i] === 0) continue;
        for (let j = 0; j < layout.size; j++) variance += mean[i] * mean[j] * covariance[i * layout.size + j];
      }
      return Math.sqrt(Math.max(0, variance));
    },
    coastRuns: runs.filter((run) => run.segments.coast).length,
    slopeFrom:
      profiles.size === 0
        ? []
        : [
            ...(observations.tilts.length > 0 ? (["accelerometer"] as const) : []),
            ...(observations.climbs.length > 0 ? (["altitude"] as const) : []),
            ...(observations.coasts.length > 0 ? (["coast-downs"] as const) : []),
          ],
  };
}

function addPriors(data: NormalEquations, layout: Layout, runs: number, weight: number): void {
  const prior = (index: number, mean: number, sd: number) => addRow(data, [index], [1], mean, 1 / sd ** 2);
  prior(0, PRIOR.rolling[0] * weight, PRIOR.rolling[1] * weight);
  prior(1, PRIOR.f1NPerMps[0], PRIOR.f1NPerMps[1]);
  prior(2, PRIOR.dragAreaHalfDensity[0], PRIOR.dragAreaHalfDensity[1]);
  prior(layout.wind, PRIOR.windMps[0], PRIOR.windMps[1]);
  prior(layout.pitch, PRIOR.pitch[0], PRIOR.pitch[1]);
  for (let r = 0; r < runs; r++) {
    prior(layout.runWind(r), 0, PRIOR.windBetweenRunsMps);
    prior(layout.bias(r), 0, PRIOR.biasMps2);
  }
}

/** Gradient of the resistance of one run with respect to the unknowns, as a sparse row. */
function resistanceRow(
  layout: Layout,
  profiles: HeightProfile,
  base: number,
  run: RoadRun,
  r: number,
  speedMps: number,
  positionM: number,
  x: Float64Array,
  weight: number,
): [number[], number[]] {
  const d = run.track.direction;
  const air = speedMps - d * (x[layout.wind] + x[layout.runWind(r)]);
  const perWind = -2 * d * x[2] * run.densityRatio * Math.abs(air);
  const [indices, values] = profiles.slopeRow(base, r, positionM);
  return [
    [0, 1, 2, layout.wind, layout.runWind(r), ...indices],
    [
      1,
      speedMps,
      run.densityRatio * air * Math.abs(air),
      perWind,
      perWind,
      ...values.map((value) => value * weight),
    ],
  ];
}

interface Residuals {
  coasts: number[];
  tilts: number[];
  climbs: number[];
}

/** Adds every reading with its weight; returns the standardised residuals at the current estimate, in order. */
function addObservations(
  data: NormalEquations,
  layout: Layout,
  profiles: HeightProfile,
  base: number,
  runs: readonly RoadRun[],
  observations: RoadObservations,
  x: Float64Array,
  scatter: { coast: number; tilt: number; climb: number },
  weight: number,
  neutralMassKg: number,
): Residuals {
  const out: Residuals = { coasts: [], tilts: [], climbs: [] };
  const add = (
    list: number[],
    indices: number[],
    values: number[],
    target: number,
    variance: number,
    linear: number,
  ) => {
    const predicted = indices.reduce((sum, index, k) => sum + values[k] * x[index], 0) + linear;
    const standard = (target - predicted) / Math.sqrt(variance);
    list.push(standard);
    const huber = Math.min(1, 2.5 / Math.max(1e-9, Math.abs(standard)));
    addRow(data, indices, values, target - linear, huber / variance);
  };
  for (const o of observations.coasts) {
    const [indices, values] = resistanceRow(
      layout,
      profiles,
      base,
      runs[o.run],
      o.run,
      o.speedMps,
      o.positionM,
      x,
      weight,
    );
    // The wind enters squared: its row is the tangent, the constant that the tangent misses goes to the other side.
    const w = x[layout.wind] + x[layout.runWind(o.run)];
    const tangent = -values[3] * w;
    const gustN = 0.3 * 2 * 0.42 * o.speedMps;
    const variance = scatter.coast ** 2 * (neutralMassKg ** 2 * o.accelerationVariance + gustN ** 2);
    add(out.coasts, indices, values, -neutralMassKg * o.accelerationMps2, variance, tangent);
  }
  for (const o of observations.tilts) {
    const [indices, values] = profiles.slopeRow(base, o.run, o.positionM);
    add(
      out.tilts,
      [layout.pitch, layout.bias(o.run), ...indices],
      [o.accelerationMps2, 1, ...values.map((v) => v * STANDARD_GRAVITY_MPS2)],
      o.readingMps2 - o.accelerationMps2,
      (scatter.tilt ** 2 * 0.02 ** 2) / o.seconds,
      0,
    );
  }
  for (const o of observations.climbs) {
    const [indices, values] = profiles.climbRow(base, o.run, o.fromM, o.toM);
    add(out.climbs, indices, values, o.climbM, scatter.climb ** 2 * 0.2 ** 2, 0);
  }
  return out;
}

/** Factor on the standard deviation of a kind of reading: robust scatter, widened when neighbours agree too well to be independent. */
function groupScatter(standardised: readonly number[]): number {
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

function chooseRoughness(data: NormalEquations, profiles: HeightProfile, base: number): number {
  if (profiles.size === 0) return 1e-8;
  let best = 1e-8;
  let bestScore = Number.POSITIVE_INFINITY;
  for (let exponent = -11; exponent <= -6; exponent += 0.5) {
    const trial = { ...data, matrix: data.matrix.slice(), right: data.right.slice() };
    const roughness = 10 ** exponent;
    profiles.addPenalty(trial, base, roughness, PRIOR.tilt);
    const solved = solveNormal(trial);
    const score = solved.objective + solved.logDeterminant + profiles.penaltyRows * Math.log(roughness);
    if (score < bestScore) {
      bestScore = score;
      best = roughness;
    }
  }
  return best;
}
