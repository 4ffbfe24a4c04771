/** One value a grid point; null is a gap and stays one. */
export type Series = readonly (number | null)[];

/** A stretch of the x axis, in its unit. */
export interface Range {
  from: number;
  to: number;
}

/** Index of the x nearest to `at` in an ascending grid; -1 for an empty one. O(log n). */
export function nearestIndex(xs: readonly number[], at: number): number {
  let low = 0;
  let high = xs.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if ((xs[middle] ?? 0) <= at) low = middle;
    else high = middle;
  }
  const left = xs[low];
  const right = xs[high];
  if (left === undefined || right === undefined) return -1;
  return at - left <= right - at ? low : high;
}

/** First and last index whose x lies in the range, ends included; null when none does. */
export function indexSpan(xs: readonly number[], range: Range): { first: number; last: number } | null {
  const first = xs.findIndex((x) => x >= range.from);
  const last = xs.findLastIndex((x) => x <= range.to);
  return first === -1 || last < first ? null : { first, last };
}

/** Smallest and largest finite value over several series between two indices; null when all is gap. */
export function extentOf(series: readonly Series[], first: number, last: number): [number, number] | null {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const values of series) {
    for (let i = first; i <= last; i += 1) {
      const value = values[i];
      if (value === null || value === undefined || !Number.isFinite(value)) continue;
      if (value < low) low = value;
      if (value > high) high = value;
    }
  }
  return low <= high ? [low, high] : null;
}
