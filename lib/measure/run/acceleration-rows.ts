import type { RunSignals } from "@/lib/measure/run/run-signals";

/**
 * Acceleration a row: difference of the mean finding speeds of the `widthS` after and before it; O(rows). Rough on purpose,
 * for finding segments only.
 */
export function accelerationRows(signals: RunSignals, widthS: number): Float64Array {
  const { timeS, speedRows } = signals;
  const n = timeS.length;
  const width = Math.max(1, Math.round(widthS * signals.rateHz));
  const sum = new Float64Array(n + 1);
  const timeSum = new Float64Array(n + 1);
  for (let i = 0; i < n; i++) {
    sum[i + 1] = sum[i] + speedRows[i];
    timeSum[i + 1] = timeSum[i] + timeS[i];
  }
  return timeS.map((_, i) => {
    const a = Math.max(0, i - width);
    const b = Math.min(n, i + width);
    if (i - a < 1 || b - i < 1) return Number.NaN;
    const rise = (sum[b] - sum[i]) / (b - i) - (sum[i] - sum[a]) / (i - a);
    return rise / ((timeSum[b] - timeSum[i]) / (b - i) - (timeSum[i] - timeSum[a]) / (i - a));
  });
}
