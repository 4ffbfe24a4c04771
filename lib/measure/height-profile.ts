import type { RoadObservations, RoadRun } from "@/lib/measure/road-observations";
import { addRow, type NormalEquations } from "@/lib/signal/normal-equations";
import { type SplineBasis, splineBasis, splineWeights } from "@/lib/signal/penalised-spline";

/** Knots of the height spline: a road bends no faster than this shows, m. */
const KNOT_M = 45;

/**
 * The height of the strip as unknown spline coefficients. Runs with GPS positions share one profile of the whole strip;
 * runs without share one per leg, from tip-in on, and only where an accelerometer tells of slope; else the day has one tilt.
 */
export interface HeightProfile {
  /** Number of unknowns. */
  size: number;
  penaltyRows: number;
  /** Rise per metre travelled in the run's own direction at a position, as a sparse row over the unknowns from `base`. */
  slopeRow: (base: number, run: number, positionM: number) => [number[], number[]];
  /** Height difference between two positions of a run. */
  climbRow: (base: number, run: number, fromM: number, toM: number) => [number[], number[]];
  /** Adds ∫h″² / `roughness` (variance of slope change per metre) and the prior of the mean slope. */
  addPenalty: (equations: NormalEquations, base: number, roughness: number, tiltSd: number) => void;
}

interface Group {
  basis: SplineBasis | null;
  offset: number;
  count: number;
}

/** Lays out the height profiles that the runs of a road day need. */
export function heightProfiles(runs: readonly RoadRun[], observations: RoadObservations): HeightProfile {
  const groups: Group[] = [];
  const groupOf: number[] = [];
  const keys = runs.map((run) => (run.track.located ? "strip" : run.track.direction === 1 ? "out" : "back"));
  let size = 0;
  const tiltOnly = { basis: null, offset: -1, count: 1 } satisfies Group;
  const made = new Map<string, Group>();
  runs.forEach((_, r) => {
    let group = made.get(keys[r]);
    if (!group) {
      const members = new Set(keys.flatMap((key, k) => (key === keys[r] ? [k] : [])));
      const positions = [
        ...observations.coasts.filter((o) => members.has(o.run)).map((o) => o.positionM),
        ...observations.tilts.filter((o) => members.has(o.run)).map((o) => o.positionM),
        ...observations.climbs.filter((o) => members.has(o.run)).flatMap((o) => [o.fromM, o.toM]),
      ];
      const tilts = observations.tilts.some((o) => members.has(o.run));
      const low = Math.min(...positions);
      const high = Math.max(...positions);
      if (positions.length > 8 && high - low > 3 * KNOT_M && (keys[r] === "strip" || tilts)) {
        const basis = splineBasis(low, high, KNOT_M);
        group = { basis, offset: size, count: basis.count };
        size += basis.count;
      } else {
        if (tiltOnly.offset < 0) {
          tiltOnly.offset = size;
          size += 1;
        }
        group = tiltOnly;
      }
      made.set(keys[r], group);
      groups.push(group);
    }
    groupOf[r] = groups.indexOf(group);
  });
  const distinct = [...new Set(groups)];
  const scratch = new Float64Array(4);
  const clamp = (basis: SplineBasis, s: number) =>
    Math.min(basis.start + basis.spacing * (basis.count - 3), Math.max(basis.start, s));
  const along = (run: number) => (runs[run].track.located ? runs[run].track.direction : 1);
  return {
    size,
    penaltyRows: distinct.reduce((sum, g) => sum + (g.basis ? g.count - 2 : 0), 0),
    slopeRow: (base, run, positionM) => {
      const { basis, offset } = groups[groupOf[run]];
      if (!basis) return [[base + offset], [runs[run].track.direction]];
      const first = splineWeights(basis, clamp(basis, positionM), 1, scratch);
      const indices = [0, 1, 2, 3].map((k) => base + offset + first + k);
      return [indices, Array.from(scratch, (w) => w * along(run))];
    },
    climbRow: (base, run, fromM, toM) => {
      const { basis, offset } = groups[groupOf[run]];
      if (!basis) return [[base + offset], [toM - fromM]];
      const end = splineWeights(basis, clamp(basis, toM), 0, scratch);
      const endValues = Array.from(scratch);
      const start = splineWeights(basis, clamp(basis, fromM), 0, scratch);
      return [
        [0, 1, 2, 3].flatMap((k) => [base + offset + end + k, base + offset + start + k]),
        [0, 1, 2, 3].flatMap((k) => [endValues[k], -scratch[k]]),
      ];
    },
    addPenalty: (equations, base, roughness, tiltSd) => {
      for (const { basis, offset, count } of distinct) {
        const first = base + offset;
        if (!basis) {
          addRow(equations, [first], [1], 0, 1 / tiltSd ** 2);
          continue;
        }
        const weight = 1 / (roughness * basis.spacing ** 3);
        for (let k = 0; k + 2 < count; k++) {
          addRow(equations, [first + k, first + k + 1, first + k + 2], [1, -2, 1], 0, weight);
        }
        const length = (count - 1) * basis.spacing;
        addRow(equations, [first, first + count - 1], [-1 / length, 1 / length], 0, 1 / tiltSd ** 2);
        addRow(equations, [first], [1], 0, 1);
      }
    },
  };
}
