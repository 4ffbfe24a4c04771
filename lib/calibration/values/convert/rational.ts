import type { ReadCharacteristic } from "@/lib/calibration/values/types";

/**
 * Physical value p of raw = (a·p² + b·p + c) / (d·p² + e·p + f), the direction in which ASAP2 states it. Null where no p, every p
 * or, in the quadratic case, not exactly one p inside the limits (else inside the extended ones) gives this raw number.
 */
export function fromRational(
  [a, b, c, d, e, f]: readonly [number, number, number, number, number, number],
  raw: number,
  { lower, upper, extended }: ReadCharacteristic["limits"],
): number | null {
  const [square, linear, constant] = [a - d * raw, e * raw - b, c - f * raw];
  if (square === 0) {
    // A zero of numerator and denominator at once (0/0) has no value.
    if (linear === 0) return null;
    return solves(constant / linear) ? constant / linear : null;
  }
  const middle = -linear / 2;
  const discriminant = middle * middle - square * constant;
  if (!(discriminant >= 0)) return null;
  const root = Math.sqrt(discriminant);
  // The root of larger size first: no difference of nearly equal numbers (Numerical Recipes, 5.6).
  const q = -(middle + (middle < 0 ? -root : root));
  const roots = (q === 0 ? [0] : discriminant === 0 ? [q / square] : [q / square, constant / q]).filter(
    solves,
  );
  if (roots.length === 1) return roots[0];
  const inside = roots.filter((p) => p >= lower && p <= upper);
  if (inside.length === 1) return inside[0];
  if (inside.length > 1 || extended === null) return null;
  const wider = roots.filter((p) => p >= extended[0] && p <= extended[1]);
  return wider.length === 1 ? wider[0] : null;

  function solves(p: number): boolean {
    return Number.isFinite(p) && d * p * p + e * p + f !== 0;
  }
}
