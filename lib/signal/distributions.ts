/** Natural logarithm of the gamma function for x > 0; relative error below 1e-14 (Lanczos g = 7, 9 terms). */
export function logGamma(x: number): number {
  if (x < 0.5) return Math.log(Math.PI / Math.abs(Math.sin(Math.PI * x))) - logGamma(1 - x);
  const terms = [
    676.5203681218851, -1259.1392167224028, 771.3234287776531, -176.6150291621406, 12.507343278686905,
    -0.13857109526572012, 9.984369578019572e-6, 1.5056327351493116e-7,
  ];
  let sum = 0.9999999999998099;
  for (let i = 0; i < terms.length; i++) sum += terms[i] / (x + i);
  const t = x + 6.5;
  return 0.5 * Math.log(2 * Math.PI) + (x - 0.5) * Math.log(t) - t + Math.log(sum);
}

/** Standard normal distribution function; absolute error below 1e-15, relative in the lower tail below 1e-13. */
export function normalCdf(x: number): number {
  if (x === 0) return 0.5;
  const half = (x * x) / 2;
  const a = 0.5;
  const front = Math.exp(-half + a * Math.log(half) - logGamma(a));
  if (half < a + 1) {
    let term = 1 / a;
    let sum = term;
    for (let n = 1; n < 500 && Math.abs(term) > Math.abs(sum) * 1e-17; n++) {
      term *= half / (a + n);
      sum += term;
    }
    const p = sum * front;
    return x > 0 ? 0.5 + p / 2 : 0.5 - p / 2;
  }
  // Upper incomplete gamma function by the modified Lentz continued fraction.
  let b = half + 1 - a;
  let c = 1e300;
  let d = 1 / b;
  let h = d;
  for (let i = 1; i < 500; i++) {
    const an = -i * (i - a);
    b += 2;
    d = 1 / (an * d + b);
    c = b + an / c;
    const factor = d * c;
    h *= factor;
    if (Math.abs(factor - 1) < 1e-16) break;
  }
  const tail = (front * h) / 2;
  return x > 0 ? 1 - tail : tail;
}

/** Standard normal quantile; ±Infinity at 1 and 0, NaN outside. Newton-Halley on `normalCdf` from a tail start. */
export function normalQuantile(p: number): number {
  if (p === 0.5) return 0;
  if (!(p > 0 && p < 1)) return p === 0 ? -Infinity : p === 1 ? Infinity : Number.NaN;
  const tail = Math.min(p, 1 - p);
  // Abramowitz and Stegun 26.2.23 starts within 4.5e-4; three Halley steps reach rounding.
  const t = Math.sqrt(-2 * Math.log(tail));
  let z = -(
    t -
    (2.515517 + 0.802853 * t + 0.010328 * t * t) / (1 + 1.432788 * t + 0.189269 * t * t + 0.001308 * t ** 3)
  );
  for (let i = 0; i < 4; i++) {
    const error = ((normalCdf(z) - tail) * Math.sqrt(2 * Math.PI)) / Math.exp(-(z * z) / 2);
    z -= error / (1 + (z * error) / 2);
  }
  return p < 0.5 ? z : -z;
}

/** Regularised incomplete beta function I_x(a, b) by the modified Lentz continued fraction; relative error about 1e-14. */
export function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  if (x > (a + 1) / (a + b + 2)) return 1 - incompleteBeta(1 - x, b, a);
  const front = Math.exp(
    logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x) - Math.log(a),
  );
  const tiny = 1e-300;
  let c = 1;
  let d = 1 / nonZero(1 - ((a + b) * x) / (a + 1), tiny);
  let h = d;
  for (let m = 1; m < 1000; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / nonZero(1 + even * d, tiny);
    c = nonZero(1 + even / c, tiny);
    h *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / nonZero(1 + odd * d, tiny);
    c = nonZero(1 + odd / c, tiny);
    const factor = d * c;
    h *= factor;
    if (Math.abs(factor - 1) < 1e-16) break;
  }
  return front * h;
}

function nonZero(value: number, tiny: number): number {
  return Math.abs(value) < tiny ? tiny : value;
}

/** Student's t distribution function with `df` > 0 (need not be whole). */
export function tCdf(t: number, df: number): number {
  const tail = incompleteBeta(df / (df + t * t), df / 2, 0.5) / 2;
  return t > 0 ? 1 - tail : tail;
}

/** Quantile of Student's t with `df` > 0; bracketed Newton steps to rounding. */
export function tQuantile(p: number, df: number): number {
  if (p === 0.5) return 0;
  if (!(p > 0 && p < 1)) return p === 0 ? -Infinity : p === 1 ? Infinity : Number.NaN;
  const tail = Math.min(p, 1 - p);
  const upperTail = (t: number) => incompleteBeta(df / (df + t * t), df / 2, 0.5) / 2;
  let low = 0;
  let high = 1;
  while (upperTail(high) > tail) {
    low = high;
    high *= 2;
  }
  const logDensity = logGamma((df + 1) / 2) - logGamma(df / 2) - 0.5 * Math.log(df * Math.PI);
  let t = (low + high) / 2;
  for (let i = 0; i < 200; i++) {
    const error = upperTail(t) - tail;
    if (error > 0) low = t;
    else high = t;
    const density = Math.exp(logDensity - ((df + 1) / 2) * Math.log1p((t * t) / df));
    let next = t + error / density;
    if (!(next > low && next < high)) next = (low + high) / 2;
    if (Math.abs(next - t) <= 1e-15 * t) {
      t = next;
      break;
    }
    t = next;
  }
  return p < 0.5 ? -t : t;
}
