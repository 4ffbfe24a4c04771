import { leastSquares } from "@/lib/signal/least-squares";

/** The local fit spans this much to each side and leaves out this much around the point itself, 1/min. */
const FIT_RPM = 500;
const HOLE_RPM = 150;
/** Points that the fit needs below and above the hole. */
const LEAST_BELOW = 3;
const LEAST_ABOVE = 1;

/** Points on each side from which on a step of the curve can be told from a spike. */
const LEAST_FOR_STEP = 4;

/** Rows whose products with the curve from `first` on give the fit's value at one point and half the step across it. */
interface LocalFit {
  first: number;
  value: Float64Array;
  halfStep: Float64Array;
}

/** What one curve shows: its deviation from the local fit, and half the step that the fit finds across each point. */
export interface CurveDeviation {
  deviation: Float64Array;
  halfStep: Float64Array;
}

/**
 * Deviations of curves on an even grid from their local fits: quadratic plus a step at the point (tricube weights, ± 500 1/min),
 * leaving out the point's own surroundings (± 150 1/min) and the `leftOut` points. What a step explains is no spike: a caller
 * takes |half step| off a deviation. NaN where a curve has a gap or its fit too few points, as in the last 200 1/min. Fits of
 * curves with the same gaps are worked out once. `curves` NaN = gap.
 */
export function curveDeviations(
  stepRpm: number,
  curves: readonly Float64Array[],
  leftOut: Uint8Array,
): CurveDeviation[] {
  const known = new Map<string, (LocalFit | null)[]>();
  return curves.map((curve) => {
    const usable = curve.map((y, k) => (Number.isNaN(y) || leftOut[k] ? 0 : 1));
    const key = usable.join("");
    const fits = known.get(key) ?? Array.from(curve, (_, k) => localFit(stepRpm, usable, k));
    known.set(key, fits);
    const product = (k: number, row: (fit: LocalFit) => Float64Array) => {
      const fit = fits[k];
      if (!fit) return Number.NaN;
      let sum = 0;
      row(fit).forEach((weight, i) => {
        if (weight !== 0) sum += weight * curve[fit.first + i];
      });
      return sum;
    };
    return {
      deviation: curve.map((y, k) => y - product(k, ({ value }) => value)),
      halfStep: curve.map((_, k) => product(k, ({ halfStep }) => halfStep)),
    };
  });
}

/** The rows of one point's fit by its weighted least squares in u = Δ/FIT_RPM; null: too few points. */
function localFit(stepRpm: number, usable: Float64Array, k: number): LocalFit | null {
  const hole = Math.floor(HOLE_RPM / stepRpm);
  const reach = Math.ceil(FIT_RPM / stepRpm) - 1;
  const first = Math.max(0, k - reach);
  const points: number[] = [];
  for (let j = first; j <= Math.min(usable.length - 1, k + reach); j++)
    if (Math.abs(j - k) > hole && usable[j]) points.push(j);
  const below = points.filter((j) => j < k).length;
  const above = points.length - below;
  if (below < LEAST_BELOW || above < LEAST_ABOVE) return null;
  const columns = Math.min(below, above) >= LEAST_FOR_STEP ? 4 : 3;
  const roots = points.map((j) => (1 - Math.abs(((j - k) * stepRpm) / FIT_RPM) ** 3) ** 1.5);
  const design = Float64Array.from(
    points.flatMap((j, i) => {
      const u = ((j - k) * stepRpm) / FIT_RPM;
      return [1, u, u * u, Math.sign(u)].slice(0, columns).map((x) => x * roots[i]);
    }),
  );
  const { unscaledCovariance } = leastSquares(design, new Float64Array(points.length), columns);
  const rowOf = (parameter: number) => {
    const row = new Float64Array(points[points.length - 1] - first + 1);
    points.forEach((j, i) => {
      for (let c = 0; c < columns; c++)
        row[j - first] += unscaledCovariance[parameter * columns + c] * design[i * columns + c] * roots[i];
    });
    return row;
  };
  return { first, value: rowOf(0), halfStep: columns === 4 ? rowOf(3) : new Float64Array(1) };
}
