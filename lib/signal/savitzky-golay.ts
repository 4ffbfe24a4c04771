import { InvalidInputError } from "@/lib/errors";

/**
 * Weights of a Savitzky-Golay filter: least-squares polynomial of `degree` over `windowLength` equally spaced points,
 * its `derivative` evaluated `offset` points from the window's centre (0 = centre).
 * Result in units of y per (sample spacing)^derivative. O(windowLength · degree²).
 * Throws InvalidInputError `bad_window` when the window is even, too short, or the derivative exceeds the degree.
 * Source: Savitzky and Golay 1964, Analytical Chemistry 36; discrete orthogonal (Gram) form of Gorry 1990.
 */
export function savitzkyGolayWeights(
  windowLength: number,
  degree: number,
  derivative = 0,
  offset = 0,
): Float64Array {
  if (
    !Number.isInteger(windowLength) ||
    windowLength % 2 === 0 ||
    windowLength <= degree ||
    derivative > degree
  ) {
    throw new InvalidInputError(
      "bad_window",
      `A Savitzky-Golay window of ${windowLength} points can't carry degree ${degree} and derivative ${derivative}; use an odd window longer than the degree.`,
    );
  }
  const m = (windowLength - 1) / 2;
  // Gram polynomials on k = -m..m by the three-term recurrence, each with its derivatives at `offset`.
  const weights = new Float64Array(windowLength);
  let previous = new Float64Array(windowLength);
  let current = new Float64Array(windowLength).fill(1);
  let previousAt = new Float64Array(derivative + 1);
  let currentAt = new Float64Array(derivative + 1);
  currentAt[0] = 1;
  let previousNorm = 1;
  for (let j = 0; j <= degree; j++) {
    let norm = 0;
    for (let k = 0; k < windowLength; k++) norm += current[k] * current[k];
    const scale = currentAt[derivative] / norm;
    for (let k = 0; k < windowLength; k++) weights[k] += scale * current[k];
    const beta = j === 0 ? 0 : norm / previousNorm;
    const next = new Float64Array(windowLength);
    const nextAt = new Float64Array(derivative + 1);
    for (let k = 0; k < windowLength; k++) next[k] = (k - m) * current[k] - beta * previous[k];
    for (let s = 0; s <= derivative; s++) {
      nextAt[s] = offset * currentAt[s] + (s > 0 ? s * currentAt[s - 1] : 0) - beta * previousAt[s];
    }
    previous = current;
    current = next;
    previousAt = currentAt;
    currentAt = nextAt;
    previousNorm = norm;
  }
  return weights;
}

/**
 * Savitzky-Golay filter of equally spaced `values` (spacing `step`): the polynomial fit of the nearest full window serves
 * the first and last half window ("polynomial ends"). Returns one value a sample, in y per step^derivative.
 * A NaN in a window makes the samples of that window NaN. Series shorter than the window: InvalidInputError `too_short`.
 */
export function savitzkyGolay(
  values: Float64Array,
  windowLength: number,
  degree: number,
  derivative = 0,
  step = 1,
): Float64Array {
  const n = values.length;
  if (n < windowLength) {
    throw new InvalidInputError("too_short", `${n} samples are fewer than the window of ${windowLength}.`);
  }
  const m = (windowLength - 1) / 2;
  const scale = 1 / step ** derivative;
  const out = new Float64Array(n);
  const centre = savitzkyGolayWeights(windowLength, degree, derivative);
  for (let i = m; i < n - m; i++) {
    let sum = 0;
    for (let k = 0; k < windowLength; k++) sum += centre[k] * values[i - m + k];
    out[i] = sum * scale;
  }
  for (let end = 0; end < m; end++) {
    const left = savitzkyGolayWeights(windowLength, degree, derivative, end - m);
    const right = savitzkyGolayWeights(windowLength, degree, derivative, m - end);
    let first = 0;
    let last = 0;
    for (let k = 0; k < windowLength; k++) {
      first += left[k] * values[k];
      last += right[k] * values[n - windowLength + k];
    }
    out[end] = first * scale;
    out[n - 1 - end] = last * scale;
  }
  return out;
}
