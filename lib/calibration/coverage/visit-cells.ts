import type { SampleTimes } from "@/lib/calibration/coverage/sample-times";

/** Where each sample lies on an axis: lower cell, −1 where missing; share of the upper one; 1 where beyond an end. */
export interface AxisPlace {
  cell: Int32Array;
  share: Float64Array;
  outside: Uint8Array;
}

/**
 * Finds samples on strictly rising axis points of the same unit. Beyond an end the last cell holds, as interpolation in the control
 * unit does; an axis of one point has no ends. Near O(n): a sample is looked for beside the one before.
 */
export function placeOnAxis(points: Float64Array, values: Float64Array): AxisPlace {
  const n = values.length;
  const [cell, share, outside] = [new Int32Array(n), new Float64Array(n), new Uint8Array(n)];
  const last = points.length - 1;
  let low = 0;
  for (let i = 0; i < n; i++) {
    const value = values[i];
    if (!Number.isFinite(value)) cell[i] = -1;
    else if (value <= points[0]) outside[i] = last > 0 && value < points[0] ? 1 : 0;
    else if (value >= points[last]) {
      cell[i] = last;
      outside[i] = last > 0 && value > points[last] ? 1 : 0;
    } else {
      while (value < points[low]) low--;
      while (value >= points[low + 1]) low++;
      cell[i] = low;
      share[i] = (value - points[low]) / (points[low + 1] - points[low]);
    }
  }
  return { cell, share, outside };
}

/** What one table collects over all runs; one entry a cell, x fastest. */
export interface CellVisits {
  seconds: Float64Array;
  visits: Float64Array;
  secondsOutside: number;
}

/** A cell is entered anew after being left for this long (common practice, no source). */
const AWAY_S = 0.5;
/** A table has up to five axes, so that a sample lies between up to 32 cells. */
const MOST_CORNERS = 32;

/**
 * Adds one run to a table: each sample's worth shared among the cells that multilinear interpolation uses, by their weight. A cell
 * is entered anew when the sample before lay elsewhere, or behind a gap, and it was last used at least 0.5 s ago. Samples without a
 * place on every axis, and those worth nothing, are passed over. `places`: one an axis, x first.
 */
export function visitCells(
  table: CellVisits,
  dims: readonly number[],
  places: readonly AxisPlace[],
  timeS: Float64Array,
  { worthS, joined }: SampleTimes,
): void {
  const { seconds, visits } = table;
  const lastSample = new Int32Array(seconds.length).fill(-1);
  const at = new Int32Array(MOST_CORNERS);
  const weight = new Float64Array(MOST_CORNERS);
  for (let i = 0; i < timeS.length; i++) {
    if (worthS[i] === 0) continue;
    at[0] = 0;
    weight[0] = worthS[i];
    let corners = 1;
    let stride = 1;
    let beyond = 0;
    for (let axis = 0; axis < places.length; axis++) {
      const { cell, share, outside } = places[axis];
      if (cell[i] < 0) {
        corners = 0;
        break;
      }
      beyond |= outside[i];
      const upper = share[i];
      for (let k = 0; k < corners; k++) at[k] += cell[i] * stride;
      if (upper > 0) {
        for (let k = 0; k < corners; k++) {
          at[corners + k] = at[k] + stride;
          weight[corners + k] = weight[k] * upper;
          weight[k] -= weight[corners + k];
        }
        corners *= 2;
      }
      stride *= dims[axis];
    }
    if (corners > 0 && beyond) table.secondsOutside += worthS[i];
    for (let k = 0; k < corners; k++) {
      const cell = at[k];
      seconds[cell] += weight[k];
      const seen = lastSample[cell];
      const left = seen < i - 1 || joined[i] === 0;
      if (seen < 0 || (left && timeS[i] - timeS[seen] >= AWAY_S)) visits[cell]++;
      lastSample[cell] = i;
    }
  }
}
