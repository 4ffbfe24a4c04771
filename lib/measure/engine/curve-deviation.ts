import { localQuadratic } from "@/lib/signal/local-quadratic";

/** The local fit spans this much to each side and leaves out this much around the point itself, 1/min. */
const FIT_RPM = 500;
const HOLE_RPM = 150;
/** Points that the fit needs below and above the hole. */
const LEAST_BELOW = 3;
const LEAST_ABOVE = 1;

/**
 * Deviation of log torque from a local quadratic (tricube weights, ± 500 1/min) that leaves out the point's own surroundings
 * (± 150 1/min) and the `left_out` points. NaN where the fit has too few points, as in the last 200 1/min of a curve.
 * `rpm` is an even grid; `logTorque` NaN = gap.
 */
export function curveDeviation(
  rpm: Float64Array,
  logTorque: Float64Array,
  leftOut: Uint8Array,
): Float64Array {
  const step = rpm.length > 1 ? rpm[1] - rpm[0] : FIT_RPM;
  const hole = Math.floor(HOLE_RPM / step);
  const reach = Math.ceil(FIT_RPM / step) - 1;
  const fitted = logTorque.map((y, k) => (leftOut[k] ? Number.NaN : y));
  return logTorque.map((y, k) => {
    if (Number.isNaN(y)) return Number.NaN;
    const count = (from: number, to: number) => {
      let n = 0;
      for (let j = Math.max(0, from); j <= Math.min(rpm.length - 1, to); j++)
        if (!Number.isNaN(fitted[j])) n++;
      return n;
    };
    if (count(k - reach, k - hole - 1) < LEAST_BELOW || count(k + hole + 1, k + reach) < LEAST_ABOVE)
      return Number.NaN;
    const from = Math.max(0, k - hole);
    const kept = fitted.slice(from, k + hole + 1);
    fitted.fill(Number.NaN, from, k + hole + 1);
    const fit = localQuadratic(rpm, fitted, rpm[k], FIT_RPM);
    fitted.set(kept, from);
    return fit ? y - fit.value : Number.NaN;
  });
}
