import type { DeltaRegion } from "@/lib/measure/types";

/** A region of fewer than this many 1/min is no region: an engine does not gain in a slot of two grid points. */
const LEAST_REGION_RPM = 100;

/**
 * Engine-speed regions in which the whole band lies above zero (gain) or below (loss). `rpm` rises; NaN low or high ends a
 * region, and so does a hole in `rpm`, where too few runs were compared. Regions narrower than `LEAST_REGION_RPM` are left out.
 */
export function verdictRegions(
  rpm: readonly number[],
  low: ArrayLike<number>,
  high: ArrayLike<number>,
): DeltaRegion[] {
  const regions: DeltaRegion[] = [];
  const step = rpm.slice(1).reduce((least, x, k) => Math.min(least, x - rpm[k]), Number.POSITIVE_INFINITY);
  let current: DeltaRegion | null = null;
  rpm.forEach((x, k) => {
    const verdict = low[k] > 0 ? "gain" : high[k] < 0 ? "loss" : null;
    const goesOn = k > 0 && x - rpm[k - 1] < 1.5 * step;
    if (current && goesOn && verdict === current.verdict) current.to_rpm = x;
    else {
      current = verdict && { from_rpm: x, to_rpm: x, verdict };
      if (current) regions.push(current);
    }
  });
  return regions.filter((region) => region.to_rpm - region.from_rpm >= LEAST_REGION_RPM);
}
