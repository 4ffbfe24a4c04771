import { logGamma } from "@/lib/signal/distributions";

/** Regularised lower incomplete gamma function P(a, x) for x ≥ 0; series below a + 1, else Lentz's continued fraction. Error below 1e-13. */
function incompleteGamma(a: number, x: number): number {
  if (x <= 0) return 0;
  const front = Math.exp(a * Math.log(x) - x - logGamma(a));
  if (x < a + 1) {
    let term = 1 / a;
    let sum = term;
    for (let k = 1; k < 10_000 && term > sum * 1e-17; k++) {
      term *= x / (a + k);
      sum += term;
    }
    return front * sum;
  }
  const tiny = 1e-300;
  let b = x + 1 - a;
  let c = 1 / tiny;
  let d = 1 / b;
  let h = d;
  for (let k = 1; k < 10_000; k++) {
    const step = -k * (k - a);
    b += 2;
    d = 1 / (step * d + b || tiny);
    c = b + step / c || tiny;
    h *= d * c;
    if (Math.abs(d * c - 1) < 1e-15) break;
  }
  return 1 - front * h;
}

/** Distribution function of chi-square with `df` > 0 degrees of freedom; 0 for x ≤ 0. Source: Abramowitz and Stegun 26.4. */
export function chiSquareCdf(x: number, df: number): number {
  return incompleteGamma(df / 2, x / 2);
}

/** Quantile of chi-square for 0 < p < 1 by bisection, relative error below 1e-12. @throws RangeError for p outside */
export function chiSquareQuantile(p: number, df: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`p must lie between 0 and 1, not ${p}`);
  let low = 0;
  let high = df;
  while (chiSquareCdf(high, df) < p) high *= 2;
  while (high - low > 1e-13 * high) {
    const middle = (low + high) / 2;
    if (chiSquareCdf(middle, df) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
