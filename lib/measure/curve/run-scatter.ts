import type { Series } from "@/lib/measure/types";

/** Engine speeds to each side over which the scatter of the runs is pooled, 1/min. */
const POOL_RPM = 200;

/** Relative standard deviation of single runs about their side's mean at each point; null where no side has two runs. */
export interface RunScatter {
  relative: Series;
  /** Degrees of freedom at each point: runs less sides of those that reach it; 0 where no side has two. */
  degrees: number[];
}

/**
 * Scatter of runs, pooled over sides (squares about each side's mean over n − 1) and over ±200 1/min, so that the luck of one
 * point does not decide. Neighbouring points are nearly the same witness: the degrees of freedom are those of the point itself.
 */
export function runScatter(
  rpm: readonly number[],
  sides: readonly { mean: Series; curves: readonly Series[] }[],
): RunScatter {
  const squares = new Float64Array(rpm.length);
  const degrees = new Float64Array(rpm.length);
  for (const { mean, curves } of sides) {
    rpm.forEach((_, k) => {
      const level = mean[k];
      const values = curves.flatMap((curve) => curve[k] ?? []);
      if (level === null || values.length < 2) return;
      for (const value of values) squares[k] += (value / level - 1) ** 2;
      degrees[k] += values.length - 1;
    });
  }
  const step = rpm.length > 1 ? rpm[1] - rpm[0] : POOL_RPM;
  const reach = Math.round(POOL_RPM / step);
  return {
    relative: rpm.map((_, k) => {
      const from = Math.max(0, k - reach);
      const sum = (values: Float64Array) => values.subarray(from, k + reach + 1).reduce((a, b) => a + b, 0);
      return degrees[k] > 0 ? Math.sqrt(sum(squares) / sum(degrees)) : null;
    }),
    degrees: [...degrees],
  };
}
