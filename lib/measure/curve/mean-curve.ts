import type { Series } from "@/lib/measure/types";

/**
 * Mean curve of several runs on one grid. Where runs are missing (masked spans, shorter pulls) the mean of the others is
 * corrected by the missing runs' own level, so that the curve has no step where a run drops out: log torque = curve + run,
 * fitted by turns. Points with fewer than half of the runs are null. One run: the run itself.
 */
export function meanCurve(curves: readonly Series[]): Series {
  const count = curves.length;
  const points = curves[0]?.length ?? 0;
  const logs = curves.map((curve) =>
    curve.map((value) => (value !== null && value > 0 ? Math.log(value) : null)),
  );
  const level = new Float64Array(count);
  const shape: Series = new Array<number | null>(points).fill(null);
  for (let pass = 0; pass < 200; pass++) {
    for (let k = 0; k < points; k++) {
      let sum = 0;
      let n = 0;
      logs.forEach((log, r) => {
        const value = log[k];
        if (value === null) return;
        sum += value - level[r];
        n++;
      });
      shape[k] = n > 0 && 2 * n >= count ? sum / n : null;
    }
    let moved = 0;
    logs.forEach((log, r) => {
      let sum = 0;
      let n = 0;
      log.forEach((value, k) => {
        const mean = shape[k];
        if (value === null || mean === null) return;
        sum += value - mean;
        n++;
      });
      const next = n > 0 ? sum / n : 0;
      moved = Math.max(moved, Math.abs(next - level[r]));
      level[r] = next;
    });
    const centre = level.reduce((sum, x) => sum + x, 0) / count;
    for (let r = 0; r < count; r++) level[r] -= centre;
    if (moved < 1e-12) break;
  }
  return shape.map((value) => (value === null ? null : Math.exp(value)));
}
