import type { HeightProfile } from "@/lib/measure/road/height-profile";
import {
  GUST_MPS,
  type RoadLayout,
  type RoadProblem,
  resistanceRow,
} from "@/lib/measure/road/road-equations";
import {
  type NormalEquations,
  type NormalSolution,
  normalEquations,
  solveNormal,
  varianceOf,
} from "@/lib/signal/normal-equations";

/** What a road day's uncertainty comes from. Slope carries the accelerometer's pitch and bias with it. */
export const ROAD_SOURCES = ["wind", "grade", "resistance"] as const;
export type RoadSource = (typeof ROAD_SOURCES)[number];

/** All three sources unknown, as bits. */
const EVERYTHING = 7;

/** A point of a run: road speed and position on the strip. */
export interface RoadPoint {
  speedMps: number;
  positionM: number;
}

/** The joint uncertainty of everything that a road day estimates. */
export interface RoadVariance {
  /** Change of the mean resistance over some points of one run per unit of each unknown. */
  gradient: (run: number, points: readonly RoadPoint[]) => Float64Array;
  /** Variance of a combination of the unknowns. */
  total: (gradient: Float64Array) => number;
  /** The same variance by source; the parts are never negative and add up to it. */
  parts: (gradient: Float64Array) => Record<RoadSource, number>;
  /** Standard deviation of the force of gusts on one run at a road speed, N: the wind of a run is its mean only. */
  gustN: (run: number, speedMps: number) => number;
}

/**
 * Covariance of a solved road day. Wind, slope and resistance are told apart by the same coast-downs and so are correlated;
 * each gets its Shapley share of the variance: what learning it exactly would take away, averaged over all orders in which the
 * three could be learned (Owen 2014, SIAM/ASA J. Uncertainty Quantification 2, from memory). What is left when some unknowns
 * are known follows from the sub-block of the normal equations. `coastScatter`: by how much the coast-downs scatter more than
 * was assumed of them; the gusts inside a run are taken to exceed the assumption as much.
 */
export function roadVariance(
  problem: RoadProblem,
  profile: HeightProfile,
  x: Float64Array,
  equations: NormalEquations,
  coastScatter: number,
): RoadVariance {
  const sources = sourcesOf(problem.layout, problem.runs.length);
  const known = new Map<number, { places: number[]; solution: NormalSolution }>();
  const left = (gradient: Float64Array, unknown: number) => {
    if (unknown === 0) return 0;
    let part = known.get(unknown);
    if (!part) {
      const places = Array.from(sources.keys()).filter((k) => unknown & (1 << sources[k]));
      part = { places, solution: solveNormal(block(equations, places)) };
      known.set(unknown, part);
    }
    return varianceOf(
      part.solution,
      Float64Array.from(part.places, (k) => gradient[k]),
    );
  };
  return {
    gradient: (r, points) => {
      const mean = new Float64Array(problem.layout.size);
      for (const { speedMps, positionM } of points) {
        const { indices, values } = resistanceRow(problem, r, speedMps, profile.slopeRow(r, positionM), x);
        indices.forEach((index, k) => {
          mean[index] += values[k] / points.length;
        });
      }
      return mean;
    },
    total: (gradient) => left(gradient, EVERYTHING),
    parts: (gradient) => {
      const [wind, grade, resistance] = shapley((unknown) => left(gradient, unknown));
      return { wind, grade, resistance };
    },
    gustN: (r, speedMps) =>
      2 * Math.abs(x[2]) * problem.runs[r].densityRatio * speedMps * GUST_MPS * coastScatter,
  };
}

/** Place in ROAD_SOURCES of every unknown. */
function sourcesOf(layout: RoadLayout, runs: number): number[] {
  const sources = new Array<number>(layout.size).fill(1);
  sources.fill(2, 0, 3);
  sources[layout.beyond] = 2;
  sources[layout.wind] = 0;
  for (let r = 0; r < runs; r++) sources[layout.runWind(r)] = 0;
  return sources;
}

/** The rows and columns of the equations that stay unknown. */
function block({ size, matrix }: NormalEquations, places: readonly number[]): NormalEquations {
  const out = normalEquations(places.length);
  places.forEach((i, a) => {
    places.forEach((j, b) => {
      out.matrix[a * places.length + b] = matrix[i * size + j];
    });
  });
  return out;
}

/** Shapley values of three players from the worth of each coalition, given as bits 1, 2, 4. */
function shapley(worth: (coalition: number) => number): [number, number, number] {
  const value = [0, 1, 2, 3, 4, 5, 6, 7].map(worth);
  const share = (i: number, j: number, k: number) =>
    (value[i] + value[7] - value[j | k]) / 3 + (value[i | j] - value[j] + value[i | k] - value[k]) / 6;
  return [share(1, 2, 4), share(2, 1, 4), share(4, 1, 2)];
}
