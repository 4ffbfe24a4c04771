import type { Pair } from "@/lib/calibration/changes/pair";
import type { PhysicalValue, ReadAxis } from "@/lib/calibration/values/types";

interface Found {
  /** Added, removed, of another shape, or a text: as a whole something else. */
  whole: boolean;
  axisChanged: boolean;
  differing: readonly number[];
  /** Largest change of a number, without sign, 0 where there is none. */
  largest: number;
}

/** Numbers that are all alike but for the last digit must not make an effect that no JSON holds. */
const MOST = 1e6;

/**
 * How much a change matters, to sort by: 0 = nothing, 1 = as much as everything there was. Numbers: the largest change over the span
 * of the values before, or over the span of the limits where that is smaller or the values have no span (one value, all alike). Words
 * and numbers without a span: the share of cells that changed. Added, removed, reshaped and text: 1. Axes: the largest shift of a
 * point over the span of the axis before. The largest of these. Common practice, no source.
 */
export function effectOf({ before, after }: Pair, { whole, axisChanged, differing, largest }: Found): number {
  if (whole || !before || !after) return 1;
  const { lower, upper } = before.limits;
  const spans = [spanOf(before.values), upper - lower].filter(
    (span): span is number => span !== null && span > 0,
  );
  const span = Math.min(...spans);
  const share = before.raw.length > 0 ? differing.length / before.raw.length : 0;
  const ofValues = largest > 0 && Number.isFinite(span) ? largest / span : share;
  return Math.min(MOST, Math.max(ofValues, axisChanged ? axisEffect(before.axes, after.axes) : 0));
}

/** Greatest minus least of the numbers, null where there is none. */
export function spanOf(values: readonly PhysicalValue[]): number | null {
  let [low, high] = [Infinity, -Infinity];
  for (const value of values) {
    if (typeof value !== "number") continue;
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  return low <= high ? high - low : null;
}

function axisEffect(before: readonly ReadAxis[], after: readonly ReadAxis[]): number {
  return before.reduce((most, axis, k) => Math.max(most, shiftOf(axis, after[k])), 0);
}

function shiftOf(axis: ReadAxis, after: ReadAxis): number {
  // Another quantity on the axis, or a point that is no number, can't be measured: counted as a whole.
  if (axis.inputQuantity !== after.inputQuantity || axis.unit !== after.unit) return 1;
  let most = 0;
  for (const [k, from] of axis.points.entries()) {
    const to = after.points[k];
    if (from === to) continue;
    if (typeof from !== "number" || typeof to !== "number") return 1;
    most = Math.max(most, Math.abs(to - from));
  }
  const span = spanOf(axis.points);
  return most === 0 ? 0 : span ? most / span : 1;
}
