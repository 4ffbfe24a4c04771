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

/** Quantile of the finite values by linear interpolation between order statistics (the R-7 method); NaN when empty. */
export function quantile(values: ArrayLike<number>, p: number): number {
  const sorted = Float64Array.from(values).filter(Number.isFinite).sort();
  if (sorted.length === 0) return Number.NaN;
  const position = (sorted.length - 1) * Math.min(1, Math.max(0, p));
  const low = Math.floor(position);
  const high = Math.min(sorted.length - 1, low + 1);
  return sorted[low] + (position - low) * (sorted[high] - sorted[low]);
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
