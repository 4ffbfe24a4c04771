import { type HeightProfile, heightProfile } from "@/lib/measure/road/height-profile";
import {
  addObservations,
  addPriors,
  heightRows,
  ROAD_PRIOR,
  type RoadProblem,
  roadLayout,
  type Scatter,
} from "@/lib/measure/road/road-equations";
import type { CoastWindow, RoadObservations, RoadRun } from "@/lib/measure/road/road-observations";
import { type RoadVariance, roadVariance } from "@/lib/measure/road/road-variance";
import { type NormalEquations, normalEquations, solveNormal } from "@/lib/signal/normal-equations";
import { STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

/** What the road and the air do to the car on one road day, with the joint uncertainty of all of it. */
export interface RoadDay {
  f0N: number;
  f1NPerMps: number;
  f2NPerMps2: number;
  /** Resistance at a speed and position in one run, wind and slope of that run in it, N. */
  resistanceN: (run: number, speedMps: number, positionM: number) => number;
  /** Rise per metre travelled of one run at a position. */
  slope: (run: number, positionM: number) => number;
  /** Joint uncertainty of all unknowns of the day. */
  variance: RoadVariance;
  /** How many runs have a coast-down; 0: all figures are priors only. */
  coastRuns: number;
  /** Range of road speed that all coast-downs together cover, m/s: from 20 km/h on the losses carry an absolute figure. */
  coveredMps: number;
}

/** Coast-downs of all runs must cover this much between them for an absolute figure. */
const LEAST_COVERED_MPS = 20 / 3.6;

/** True when the coast-downs of a road day, taken together, carry an absolute power. */
export function carriesAbsolute(day: RoadDay): boolean {
  return day.coveredMps >= LEAST_COVERED_MPS;
}

/** Rounds of weighting, wind tangent and road roughness; they settle in four. */
const PASSES = 4;

/**
 * Estimates resistance, wind and slope of a road day from all its coast-downs at once:
 * −a·(m + ΣJw/r²) = f0 + f1·v + f2·(ρ/ρ̄)·(v − d·w)|v − d·w| + m·g·d·θ(s), with one wind a run around the day's mean, and the
 * slope θ from whatever tells of it: coast-downs in both directions over the same road, accelerometer readings
 * (bias a run + (1 + pitch)·a + d·g·θ), altitude differences. Weighted least squares with priors; the scatter of each kind of
 * reading is estimated from its own residuals, the roughness of the road by marginal likelihood. Gauss-Newton in the wind.
 */
export function estimateRoadDay(runs: readonly RoadRun[], observations: RoadObservations): RoadDay {
  const massKg = runs.reduce((sum, run) => sum + run.massKg, 0) / runs.length;
  const first = roadLayout(runs.length, 0).size;
  const profile = heightProfile(runs, observations, first);
  const layout = roadLayout(runs.length, profile.size);
  const problem: RoadProblem = {
    layout,
    runs,
    observations,
    slopes: heightRows(profile, observations),
    massKg,
  };
  let x: Float64Array = new Float64Array(layout.size);
  x.set([
    ROAD_PRIOR.rolling[0] * massKg * STANDARD_GRAVITY_MPS2,
    ROAD_PRIOR.f1NPerMps[0],
    ROAD_PRIOR.dragAreaHalfDensity[0],
  ]);
  let scatter: Scatter = { coast: 1, tilt: 1, climb: 1 };
  let roughness = 1e-8;
  let data = normalEquations(layout.size);
  for (let pass = 0; pass < PASSES; pass++) {
    data = normalEquations(layout.size);
    addPriors(data, problem);
    const excess = addObservations(data, problem, x, scatter);
    if (pass === PASSES - 2) roughness = chooseRoughness(data, profile);
    profile.addPenalty(data, roughness, ROAD_PRIOR.tilt);
    x = solveNormal(data).x;
    if (pass > 0) {
      scatter = {
        coast: scatter.coast * excess.coast,
        tilt: scatter.tilt * excess.tilt,
        climb: scatter.climb * excess.climb,
      };
    }
  }
  return roadDay(problem, profile, x, roadVariance(problem, profile, x, data, scatter.coast));
}

function roadDay(
  problem: RoadProblem,
  profile: HeightProfile,
  x: Float64Array,
  variance: RoadVariance,
): RoadDay {
  const { layout, runs, massKg, observations } = problem;
  return {
    f0N: x[0],
    f1NPerMps: x[1],
    f2NPerMps2: x[2],
    resistanceN: (r, v, s) => {
      const { densityRatio, track, massKg: own } = runs[r];
      const air = v - track.direction * (x[layout.wind] + x[layout.runWind(r)]);
      const rolling = (x[0] * own) / massKg + x[1] * v;
      const slopeN = own * STANDARD_GRAVITY_MPS2 * profile.slopeAt(x, r, s);
      return rolling + x[2] * densityRatio * air * Math.abs(air) + slopeN;
    },
    slope: (r, s) => profile.slopeAt(x, r, s),
    variance,
    coastRuns: runs.filter((run) => run.segments.coast).length,
    coveredMps: unionMps(observations.windows),
  };
}

/** Length of the union of speed windows. */
function unionMps(windows: readonly CoastWindow[]): number {
  let total = 0;
  let reached = 0;
  for (const { lowMps, highMps } of [...windows].sort((a, b) => a.lowMps - b.lowMps)) {
    total += Math.max(0, highMps - Math.max(lowMps, reached));
    reached = Math.max(reached, highMps);
  }
  return total;
}

/** Variance of slope change per metre by marginal likelihood, 1e-11 (an airfield) to 1e-6 (a hilly lane). */
function chooseRoughness(data: NormalEquations, profile: HeightProfile): number {
  let best = 1e-8;
  let bestScore = Number.POSITIVE_INFINITY;
  if (profile.penaltyRows === 0) return best;
  for (let exponent = -11; exponent <= -6; exponent += 0.5) {
    const trial = { ...data, matrix: data.matrix.slice(), right: data.right.slice() };
    const roughness = 10 ** exponent;
    profile.addPenalty(trial, roughness, ROAD_PRIOR.tilt);
    const solved = solveNormal(trial);
    const score = solved.objective + solved.logDeterminant + profile.penaltyRows * Math.log(roughness);
    if (score < bestScore) {
      bestScore = score;
      best = roughness;
    }
  }
  return best;
}
