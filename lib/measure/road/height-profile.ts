import type { RoadObservations, RoadRun } from "@/lib/measure/road/road-observations";
import { addRow, type NormalEquations } from "@/lib/signal/normal-equations";
import { type SplineBasis, splineBasis, splineWeights } from "@/lib/signal/penalised-spline";

/** Knots of the height spline: a road bends no faster than this shows, m. */
const KNOT_M = 45;

/** A row over few unknowns. */
export interface SparseRow {
  indices: number[];
  values: number[];
}

/**
 * The height of the strip as unknown spline coefficients. Runs with GPS positions share one profile of the whole strip;
 * runs without share one per leg, from tip-in on, and only where an accelerometer tells of slope; else the day has one tilt.
 */
export interface HeightProfile {
  /** Number of unknowns. */
  size: number;
  penaltyRows: number;
  /** Rise per metre travelled in the run's own direction at a position. */
  slopeRow: (run: number, positionM: number) => SparseRow;
  /** The same evaluated for unknowns `x`. */
  slopeAt: (x: Float64Array, run: number, positionM: number) => number;
  /** Height difference between two positions of a run. */
  climbRow: (run: number, fromM: number, toM: number) => SparseRow;
  /** Adds ∫h″² / `roughness` (variance of slope change per metre) and the prior of the mean slope. */
  addPenalty: (equations: NormalEquations, roughness: number, tiltSd: number) => void;
}

interface Group {
  /** null: one tilt only. */
  basis: SplineBasis | null;
  first: number;
  count: number;
}

/** Lays out the height profiles that the runs of a road day need; the unknowns start at index `first`. */
export function heightProfile(
  runs: readonly RoadRun[],
  observations: RoadObservations,
  first: number,
): HeightProfile {
  const { groupOf, groups, size } = layOut(runs, observations, first);
  const scratch = new Float64Array(4);
  const inside = ({ start, spacing, count }: SplineBasis, s: number) =>
    Math.min(start + spacing * (count - 3), Math.max(start, s));
  const senseOf = ({ track }: RoadRun) => (track.located ? track.direction : 1);
  return {
    size,
    penaltyRows: groups.reduce((sum, g) => sum + (g.basis ? g.count - 2 : 0), 0),
    slopeRow: (run, positionM) => {
      const group = groupOf[run];
      if (!group.basis) return { indices: [group.first], values: [runs[run].track.direction] };
      const at = group.first + splineWeights(group.basis, inside(group.basis, positionM), 1, scratch);
      const sense = senseOf(runs[run]);
      return { indices: [at, at + 1, at + 2, at + 3], values: Array.from(scratch, (w) => w * sense) };
    },
    slopeAt: (x, run, positionM) => {
      const group = groupOf[run];
      if (!group.basis) return x[group.first] * runs[run].track.direction;
      const at = group.first + splineWeights(group.basis, inside(group.basis, positionM), 1, scratch);
      return (
        senseOf(runs[run]) *
        (scratch[0] * x[at] + scratch[1] * x[at + 1] + scratch[2] * x[at + 2] + scratch[3] * x[at + 3])
      );
    },
    climbRow: (run, fromM, toM) => {
      const group = groupOf[run];
      if (!group.basis) return { indices: [group.first], values: [toM - fromM] };
      const row: SparseRow = { indices: [], values: [] };
      for (const [position, sign] of [
        [toM, 1],
        [fromM, -1],
      ] as const) {
        const at = group.first + splineWeights(group.basis, inside(group.basis, position), 0, scratch);
        for (let k = 0; k < 4; k++) {
          row.indices.push(at + k);
          row.values.push(sign * scratch[k]);
        }
      }
      return row;
    },
    addPenalty: (equations, roughness, tiltSd) => {
      for (const group of groups) penalise(equations, group, roughness, tiltSd);
    },
  };
}

function layOut(
  runs: readonly RoadRun[],
  observations: RoadObservations,
  first: number,
): { groupOf: Group[]; groups: Group[]; size: number } {
  const keys = runs.map(({ track }) => (track.located ? "strip" : track.direction === 1 ? "out" : "back"));
  const made = new Map<string, Group>();
  let size = 0;
  for (const key of new Set(keys)) {
    const member = (o: { run: number }) => keys[o.run] === key;
    const tilts = observations.tilts.filter(member);
    const positions = [...observations.coasts.filter(member), ...tilts].map((o) => o.positionM);
    for (const climb of observations.climbs) if (member(climb)) positions.push(climb.fromM, climb.toM);
    const low = Math.min(...positions);
    const high = Math.max(...positions);
    const enough = positions.length > 8 && high - low > 3 * KNOT_M && (key === "strip" || tilts.length > 0);
    const tiltOnly = [...made.values()].find((group) => !group.basis);
    if (!enough && tiltOnly) {
      made.set(key, tiltOnly);
      continue;
    }
    const basis = enough ? splineBasis(low, high, KNOT_M) : null;
    const count = basis ? basis.count : 1;
    made.set(key, { basis, first: first + size, count });
    size += count;
  }
  const fallback: Group = { basis: null, first, count: 1 };
  return { groupOf: keys.map((key) => made.get(key) ?? fallback), groups: [...new Set(made.values())], size };
}

function penalise(
  equations: NormalEquations,
  { basis, first, count }: Group,
  roughness: number,
  tiltSd: number,
): void {
  if (!basis) {
    addRow(equations, [first], [1], 0, 1 / tiltSd ** 2);
    return;
  }
  const weight = 1 / (roughness * basis.spacing ** 3);
  for (let k = 0; k + 2 < count; k++) {
    addRow(equations, [first + k, first + k + 1, first + k + 2], [1, -2, 1], 0, weight);
  }
  const length = (count - 1) * basis.spacing;
  addRow(equations, [first, first + count - 1], [-1 / length, 1 / length], 0, 1 / tiltSd ** 2);
  // The level of the whole profile tells nothing; this holds it.
  addRow(equations, [first], [1], 0, 1);
}
