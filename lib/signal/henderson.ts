import { InvalidInputError } from "@/lib/errors";

/**
 * Weights of the Henderson moving average of odd length `windowLength` ≥ 5 (sum 1, cubic-preserving, smoothest third
 * differences). Source: Henderson 1916; closed form as in Kenny and Durbin 1982.
 */
export function hendersonWeights(windowLength: number): Float64Array {
  if (!Number.isInteger(windowLength) || windowLength % 2 === 0 || windowLength < 5) {
    throw new InvalidInputError(
      "bad_window",
      `A Henderson average needs an odd length of at least 5, not ${windowLength}.`,
    );
  }
  const n = (windowLength + 3) / 2;
  const n2 = n * n;
  const denominator = 8 * n * (n2 - 1) * (4 * n2 - 1) * (4 * n2 - 9) * (4 * n2 - 25);
  const m = (windowLength - 1) / 2;
  const weights = new Float64Array(windowLength);
  for (let j = -m; j <= m; j++) {
    const j2 = j * j;
    weights[j + m] =
      (315 * ((n - 1) ** 2 - j2) * (n2 - j2) * ((n + 1) ** 2 - j2) * (3 * n2 - 16 - 11 * j2)) / denominator;
  }
  return weights;
}
