import { normalQuantile, tCdf, tQuantile } from "@/lib/signal/distributions";
import { mean, standardDeviation } from "@/lib/signal/statistics";

/** Size, mean and sample standard deviation of one group. */
export interface Group {
  n: number;
  mean: number;
  sd: number;
}

/** A difference b − a with its test and its two-sided interval. */
export interface TwoMeans {
  difference: number;
  standardError: number;
  t: number;
  df: number;
  p: number;
  low: number;
  high: number;
}

/** Describes a list of values. */
export function groupOf(values: readonly number[]): Group {
  return { n: values.length, mean: mean(values), sd: standardDeviation(values) };
}

function testOf(difference: number, standardError: number, df: number, level: number): TwoMeans {
  const t = difference / standardError;
  const half = tQuantile(0.5 + level / 2, df) * standardError;
  return {
    difference,
    standardError,
    t,
    df,
    p: 2 * tCdf(-Math.abs(t), df),
    low: difference - half,
    high: difference + half,
  };
}

/** Welch's test of two means, Satterthwaite degrees of freedom; null when a group has fewer than two values or no spread at all. */
export function welch(a: Group, b: Group, level = 0.95): TwoMeans | null {
  const va = a.sd ** 2 / a.n;
  const vb = b.sd ** 2 / b.n;
  if (a.n < 2 || b.n < 2 || !(va + vb > 0)) return null;
  const df = (va + vb) ** 2 / (va ** 2 / (a.n - 1) + vb ** 2 / (b.n - 1));
  return testOf(b.mean - a.mean, Math.sqrt(va + vb), df, level);
}

/** Student's test of two means with one pooled variance; null as in `welch`. */
export function pooledT(a: Group, b: Group, level = 0.95): TwoMeans | null {
  const df = a.n + b.n - 2;
  const variance = ((a.n - 1) * a.sd ** 2 + (b.n - 1) * b.sd ** 2) / df;
  if (a.n < 2 || b.n < 2 || !(variance > 0)) return null;
  return testOf(b.mean - a.mean, Math.sqrt(variance * (1 / a.n + 1 / b.n)), df, level);
}

/**
 * Repeatability limit: two single results differ by less than this in `level` of cases. `df` of the standard
 * deviation, null when it is known well. ISO 5725-6 rounds 2.77 to 2.8.
 */
export function repeatabilityLimit(sd: number, df: number | null, level = 0.95): number {
  const p = 0.5 + level / 2;
  return (df === null ? normalQuantile(p) : tQuantile(p, df)) * Math.SQRT2 * sd;
}
