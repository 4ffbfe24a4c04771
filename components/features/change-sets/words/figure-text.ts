import { numberText } from "@/components/ui/data/number-text";
import type { ChangeSide, CharacteristicChange } from "@/lib/calibration/changes/types";
import type { PhysicalValue } from "@/lib/calibration/values/types";

/** Most digits behind the point that a physical value is shown with. */
const MOST_DIGITS = 6;

/**
 * Digits behind the point such that the smallest difference of a list is printed right to a tenth of itself: those
 * declared, more where it is finer, at most 6. Zeros and NaN are passed over.
 */
export function digitsFor(differences: readonly number[], declared: number): number {
  let smallest = Number.POSITIVE_INFINITY;
  for (const difference of differences) {
    const size = Math.abs(difference);
    if (size > 0 && size < smallest) smallest = size;
  }
  let digits = Math.min(declared, MOST_DIGITS);
  if (!Number.isFinite(smallest)) return digits;
  const isCoarse = () => Math.abs(Number(smallest.toFixed(digits)) - smallest) > smallest / 10;
  while (digits < MOST_DIGITS && isCoarse()) digits += 1;
  return digits;
}

/** A physical value as it is shown; a text stands as it is, an en dash where the conversion has no value. */
export function valueText(value: PhysicalValue | undefined, decimals: number): string {
  return typeof value === "string" ? value : numberText(value, { decimals });
}

/** after − before; null for texts and where one of them has no value. */
export function differenceOf(
  before: PhysicalValue | undefined,
  after: PhysicalValue | undefined,
): number | null {
  return typeof before === "number" && typeof after === "number" ? after - before : null;
}

/**
 * The difference of a changed cell with its sign. "≈ 0": stored otherwise, but too little to be seen in six digits.
 * Null where there is no difference to tell (texts).
 */
export function differenceText(
  before: PhysicalValue | undefined,
  after: PhysicalValue | undefined,
  decimals: number,
): string | null {
  const difference = differenceOf(before, after);
  if (difference === null) return null;
  const text = numberText(difference, { decimals, signed: true });
  return Number(difference.toFixed(decimals)) === 0 ? "≈\u202f0" : text;
}

/** A unit without the dash that stands for none. */
export const plainUnit = (unit: string) => (unit.trim() === "-" ? "" : unit);
const plainSide = (side: ChangeSide | null): ChangeSide | null =>
  side && { ...side, axes: side.axes.map((axis) => ({ ...axis, unit: plainUnit(axis.unit) })) };

/** The same change without the dash by which many descriptions say that there is no unit: behind a number it reads as a minus. */
export function withPlainUnits(change: CharacteristicChange): CharacteristicChange {
  return {
    ...change,
    unit: plainUnit(change.unit),
    before: plainSide(change.before),
    after: plainSide(change.after),
  };
}
