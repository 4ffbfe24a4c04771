import { normalQuantile, tQuantile } from "@/lib/signal/distributions";
import { noncentralTCdf } from "@/lib/signal/noncentral-t";

/** Chance that a two-sided pooled t test with `nPerSide` runs a side shows a true difference of `deltaOverSd` standard deviations. */
function powerOfTest(nPerSide: number, deltaOverSd: number, alpha = 0.05): number {
  const df = 2 * nPerSide - 2;
  const delta = deltaOverSd * Math.sqrt(nPerSide / 2);
  const critical = tQuantile(1 - alpha / 2, df);
  return 1 - noncentralTCdf(critical, df, delta) + noncentralTCdf(-critical, df, delta);
}

/** Runs a side that a two-sided test needs for `power`; exact noncentral t. Infinity beyond 10 000. */
export function runsPerSide(deltaOverSd: number, alpha = 0.05, power = 0.8): number {
  for (let n = 2; n <= 10_000; n++) if (powerOfTest(n, deltaOverSd, alpha) >= power) return n;
  return Number.POSITIVE_INFINITY;
}

/** The same by the normal approximation 2·((z + z)/d)², not rounded. */
export function runsPerSideNormal(deltaOverSd: number, alpha = 0.05, power = 0.8): number {
  return 2 * ((normalQuantile(1 - alpha / 2) + normalQuantile(power)) / deltaOverSd) ** 2;
}

/** Smallest difference, in standard deviations, that `nPerSide` runs a side show with `power`; bisection to 1e-10. */
export function smallestDifference(nPerSide: number, alpha = 0.05, power = 0.8): number {
  let low = 0;
  let high = 1;
  while (powerOfTest(nPerSide, high, alpha) < power) high *= 2;
  while (high - low > 1e-10) {
    const middle = (low + high) / 2;
    if (powerOfTest(nPerSide, middle, alpha) < power) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** Two-sided critical values for `count` simultaneous comparisons at family level `alpha`. */
export function familyCriticals(count: number, df: number, alpha = 0.05) {
  return {
    sidakNormal: normalQuantile(1 - (1 - (1 - alpha) ** (1 / count)) / 2),
    bonferroniNormal: normalQuantile(1 - alpha / (2 * count)),
    bonferroniT: tQuantile(1 - alpha / (2 * count), df),
  };
}
