import { incompleteBeta, logGamma, normalCdf } from "@/lib/signal/distributions";

/**
 * Distribution function of the noncentral t with `df` degrees of freedom and noncentrality `delta`.
 * Absolute error below 1e-11 for |delta| < 30. Source: Lenth 1989, Applied Statistics algorithm AS 243.
 */
export function noncentralTCdf(t: number, df: number, delta: number): number {
  if (t < 0) return 1 - noncentralTCdf(-t, df, -delta);
  const x = (t * t) / (t * t + df);
  let total = 0;
  if (x > 0) {
    const lambda = delta * delta;
    let p = 0.5 * Math.exp(-lambda / 2);
    let q = Math.sqrt(2 / Math.PI) * p * delta;
    let a = 0.5;
    const b = df / 2;
    const rxb = Math.exp(b * Math.log1p(-x));
    const logBeta = 0.5 * Math.log(Math.PI) + logGamma(b) - logGamma(a + b);
    let xOdd = incompleteBeta(x, a, b);
    let gOdd = 2 * rxb * Math.exp(a * Math.log(x) - logBeta);
    let xEven = 1 - rxb;
    let gEven = b * x * rxb;
    let remaining = 0.5 - p;
    total = p * xOdd + q * xEven;
    for (let i = 1; i < 2000; i++) {
      a += 1;
      xOdd -= gOdd;
      xEven -= gEven;
      gOdd *= (x * (a + b - 1)) / a;
      gEven *= (x * (a + b - 0.5)) / (a + 0.5);
      p *= lambda / (2 * i);
      q *= lambda / (2 * i + 1);
      remaining -= p;
      total += p * xOdd + q * xEven;
      if (Math.abs(2 * remaining * (xOdd - gOdd)) < 1e-14 && i > lambda / 2) break;
    }
  }
  return Math.min(1, total + normalCdf(-delta));
}
