/** Arithmetic mean of the finite values; NaN when there is none. */
export function mean(values: ArrayLike<number>): number {
  let sum = 0;
  let n = 0;
  for (let i = 0; i < values.length; i++) {
    if (!Number.isFinite(values[i])) continue;
    sum += values[i];
    n++;
  }
  return n > 0 ? sum / n : Number.NaN;
}

/** Sample standard deviation (n − 1) of the finite values; NaN below two. */
export function standardDeviation(values: ArrayLike<number>): number {
  const centre = mean(values);
  let sum = 0;
  let n = 0;
  for (let i = 0; i < values.length; i++) {
    if (!Number.isFinite(values[i])) continue;
    sum += (values[i] - centre) ** 2;
    n++;
  }
  return n > 1 ? Math.sqrt(sum / (n - 1)) : Number.NaN;
}

/**
 * Quantile of the finite values by linear interpolation between order statistics (the R-7 method); NaN when empty. Average O(n).
 */
export function quantile(values: ArrayLike<number>, p: number): number {
  const kept = new Float64Array(values.length);
  let n = 0;
  for (let i = 0; i < values.length; i++) if (Number.isFinite(values[i])) kept[n++] = values[i];
  if (n === 0) return Number.NaN;
  const position = (n - 1) * Math.min(1, Math.max(0, p));
  const low = Math.floor(position);
  const below = select(kept, n, low);
  if (position === low) return below;
  // After selecting, everything right of `low` is at least as large: the next order statistic is its least.
  let above = Number.POSITIVE_INFINITY;
  for (let i = low + 1; i < n; i++) if (kept[i] < above) above = kept[i];
  return below + (position - low) * (above - below);
}

/** Rounds of selection after which what is left is sorted, so that no made-up order takes quadratic time. */
const MOST_ROUNDS = 100;

/** The k-th smallest of the first `n` values, which are partly sorted in place around it (quickselect, Hoare 1961). */
function select(values: Float64Array, n: number, k: number): number {
  let left = 0;
  let right = n - 1;
  for (let round = 0; left < right; round++) {
    if (round === MOST_ROUNDS) {
      values.subarray(left, right + 1).sort();
      break;
    }
    const pivot = values[(left + right) >>> 1];
    let i = left;
    let j = right;
    while (i <= j) {
      while (values[i] < pivot) i++;
      while (values[j] > pivot) j--;
      if (i <= j) {
        const held = values[i];
        values[i++] = values[j];
        values[j--] = held;
      }
    }
    if (k <= j) right = j;
    else if (k >= i) left = i;
    else break;
  }
  return values[k];
}

/** Median of the finite values; NaN when empty. */
export function median(values: ArrayLike<number>): number {
  return quantile(values, 0.5);
}

/** Robust standard deviation: 1.4826 × median absolute deviation from the median. */
export function robustDeviation(values: ArrayLike<number>): number {
  const centre = median(values);
  return 1.4826 * median(Float64Array.from(values, (value) => Math.abs(value - centre)));
}

/** Sums over neighbours with triangular weights: 1 at the element itself, falling to 0 at `pool` + 1 elements away. O(n · pool). */
export function triangularSums(values: Float64Array, pool: number): Float64Array {
  return values.map((_, k) => {
    let sum = 0;
    for (let j = Math.max(0, k - pool); j <= Math.min(values.length - 1, k + pool); j++)
      sum += (1 - Math.abs(j - k) / (pool + 1)) * values[j];
    return sum;
  });
}
