/**
 * Finds the first of many ranges (both ends inside) that holds a number, undefined for none and for NaN. O(ranges log ranges) once,
 * O(log ranges) a number, however they overlap: each end of a range and each gap between two ends belongs to one range.
 */
export function firstRangeAt<T extends { from: number; to: number }>(
  ranges: readonly T[],
): (value: number) => T | undefined {
  const ends = Float64Array.from(new Set(ranges.flatMap(({ from, to }) => [from, to]))).sort();
  const holders = new Array<T | undefined>(2 * ends.length);
  // Where the next place without a holder is looked for; paths are halved as they are walked.
  const next = Int32Array.from({ length: holders.length + 1 }, (_, place) => place);
  const freeFrom = (start: number): number => {
    let place = start;
    while (next[place] !== place) {
      next[place] = next[next[place]];
      place = next[place];
    }
    return place;
  };
  for (const range of ranges) {
    const last = placeIn(ends, range.to);
    for (let place = freeFrom(placeIn(ends, range.from)); place <= last; place = freeFrom(place)) {
      holders[place] = range;
      next[place] = place + 1;
    }
  }
  return (value) => holders[placeIn(ends, value)];
}

/** Place of a number among sorted ends: 2k at end k, 2k + 1 behind it; −1 in front of all and for NaN. */
function placeIn(ends: Float64Array, value: number): number {
  let low = 0;
  let high = ends.length;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (ends[middle] <= value) low = middle + 1;
    else high = middle;
  }
  return low === 0 ? -1 : ends[low - 1] === value ? 2 * low - 2 : 2 * low - 1;
}
