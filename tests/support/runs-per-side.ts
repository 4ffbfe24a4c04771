import { planPower } from "@/lib/compare/plan/plan-twins";
import { tQuantile } from "@/lib/signal/distributions";

/**
 * Runs a side that a two-sided pooled t test needs to show `deltaOverSd` standard deviations with `power`: what the plan's power
 * says of two plain sides without leg and order, which published tables can be held against. NaN beyond 10 000.
 */
export function runsPerSide(deltaOverSd: number, alpha = 0.05, power = 0.8): number {
  for (let n = 2; n <= 10_000; n++) {
    const df = 2 * n - 2;
    if (planPower(deltaOverSd * Math.sqrt(n / 2), df, tQuantile(1 - alpha / 2, df)) >= power) return n;
  }
  return Number.NaN;
}
