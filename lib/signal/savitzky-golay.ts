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
  // Weights of a centred fit are even or odd with the derivative: pairs at equal distance share one product.
  const centre = savitzkyGolayWeights(windowLength, degree, derivative).map((weight) => weight * scale);
  const sign = derivative % 2 === 0 ? 1 : -1;
  fillInterior(out, values, centre, sign);
  for (let end = 0; end < m; end++) {
    // The fit at the right end is the mirror image of the one at the left.
    const weights = savitzkyGolayWeights(windowLength, degree, derivative, end - m);
    let first = 0;
    let last = 0;
    for (let k = 0; k < windowLength; k++) {
      first += weights[k] * values[k];
      last += weights[k] * values[n - 1 - k];
    }
    out[end] = first * scale;
    out[n - 1 - end] = sign * last * scale;
  }
  return out;
}

/**
 * The samples that have a full window around them, two at a time: each sum would wait for its own last addition. The odd one
 * comes first, so that nothing follows the hot loop: the engine would compile it unseen and fall back at each call.
 */
function fillInterior(out: Float64Array, values: Float64Array, centre: Float64Array, sign: number): void {
  const m = (centre.length - 1) / 2;
  const end = values.length - m;
  let i = m;
  if ((end - i) % 2 === 1) {
    out[i] = centre[m] * values[i];
    for (let k = 1; k <= m; k++) out[i] += centre[m + k] * (values[i + k] + sign * values[i - k]);
    i++;
  }
  for (; i < end; i += 2) {
    let first = centre[m] * values[i];
    let second = centre[m] * values[i + 1];
    for (let k = 1; k <= m; k++) {
      const weight = centre[m + k];
      first += weight * (values[i + k] + sign * values[i - k]);
      second += weight * (values[i + 1 + k] + sign * values[i + 1 - k]);
    }
    out[i] = first;
    out[i + 1] = second;
  }
}
