import { median } from "@/lib/signal/statistics";

/**
 * Marks samples that jump away from their neighbours: farther from the median of `2·reach + 1` samples than six robust standard
 * deviations of that window and than `floor(value)`. Returns 1 for an outlier. NaN samples are never outliers. O(n · reach).
 * Source: Hampel identifier (Hampel 1974; Pearson 2002), with a floor so that steps of a coarse channel stay.
 */
export function findOutliers(
  values: Float64Array,
  reach: number,
  floor: (median: number) => number,
): Uint8Array {
  const out = new Uint8Array(values.length);
  for (let i = 0; i < values.length; i++) {
    const window = values.subarray(Math.max(0, i - reach), i + reach + 1);
    // A sample between its two neighbours can't be a jump: most samples end here.
    const before = values[i - 1] ?? values[i];
    const after = values[i + 1] ?? values[i];
    const low = Math.min(before, after);
    const high = Math.max(before, after);
    if (values[i] >= low && values[i] <= high) continue;
    const least = floor(Math.abs(values[i]));
    if (Math.abs(values[i] - before) <= least && Math.abs(values[i] - after) <= least) continue;
    const centre = median(window);
    const distance = Math.abs(values[i] - centre);
    if (!(distance > floor(Math.abs(centre)))) continue;
    const deviation = 1.4826 * median(Float64Array.from(window, (v) => Math.abs(v - centre)));
    if (distance > 6 * deviation) out[i] = 1;
  }
  return out;
}
