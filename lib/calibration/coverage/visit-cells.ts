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
/** A table has up to five axes: beyond the first two a sample lies between up to eight lines of cells. */
const MOST_CORNERS = 8;

/** A table while one run is added to it. */
interface Tally {
  seconds: Float64Array;
  visits: Float64Array;
  timeS: Float64Array;
  joined: Uint8Array;
  /** The last sample that used a cell, −1 for none. */
  lastSample: Int32Array;
}

/** Stands for the second axis of a curve: every sample lies in its only cell. */
function noAxis(samples: number): AxisPlace {
  return {
    cell: new Int32Array(samples),
    share: new Float64Array(samples),
    outside: new Uint8Array(samples),
  };
}

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
  const lastSample = new Int32Array(table.seconds.length).fill(-1);
  const { seconds, visits } = table;
  const tally: Tally = { seconds, visits, timeS, joined, lastSample };
  const [x, y = noAxis(timeS.length), ...others] = places;
  const row = dims[0];
  const plane = row * (dims[1] ?? 1);
  const at = new Int32Array(MOST_CORNERS);
  const weight = new Float64Array(MOST_CORNERS);
  for (let i = 0; i < timeS.length; i++) {
    if (worthS[i] === 0 || x.cell[i] < 0 || y.cell[i] < 0) continue;
    at[0] = x.cell[i] + row * y.cell[i];
    weight[0] = worthS[i];
    let corners = 1;
    let beyond = x.outside[i] | y.outside[i];
    let stride = plane;
    for (let axis = 0; axis < others.length && corners > 0; axis++) {
      const { cell, share, outside } = others[axis];
      beyond |= outside[i];
      corners = cell[i] < 0 ? 0 : split(at, weight, corners, cell[i] * stride, stride, share[i]);
      stride *= dims[axis + 2];
    }
    if (corners > 0 && beyond) table.secondsOutside += worthS[i];
    for (let k = 0; k < corners; k++) {
      const upper = weight[k] * y.share[i];
      addTwo(tally, i, at[k], weight[k] - upper, x.share[i]);
      if (upper > 0) addTwo(tally, i, at[k] + row, upper, x.share[i]);
    }
  }
}

/** Splits each corner in two along a further axis; gives their number. */
function split(
  at: Int32Array,
  weight: Float64Array,
  corners: number,
  offset: number,
  stride: number,
  share: number,
): number {
  for (let k = 0; k < corners; k++) {
    at[k] += offset;
    at[corners + k] = at[k] + stride;
    weight[corners + k] = weight[k] * share;
    weight[k] -= weight[corners + k];
  }
  return share > 0 ? 2 * corners : corners;
}

/** Two neighbours along x. */
function addTwo(tally: Tally, sample: number, cell: number, worthS: number, share: number): void {
  const upper = worthS * share;
  addOne(tally, sample, cell, worthS - upper);
  if (upper > 0) addOne(tally, sample, cell + 1, upper);
}

function addOne(
  { seconds, visits, lastSample, joined, timeS }: Tally,
  sample: number,
  cell: number,
  worthS: number,
) {
  seconds[cell] += worthS;
  const seen = lastSample[cell];
  lastSample[cell] = sample;
  if (seen === sample - 1 && joined[sample] === 1) return;
  if (seen < 0 || timeS[sample] - timeS[seen] >= AWAY_S) visits[cell]++;
}
