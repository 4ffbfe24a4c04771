import type { LimitState } from "@/lib/calibration/changes/types";
import type { PhysicalValue, ReadCharacteristic } from "@/lib/calibration/values/types";

/** Conversion rounds: 255 · 0.1 is not quite 25.5. */
const ROUNDING = 1e-9;

/** Where a value lies towards its limits, both ends inside. Texts and missing values have no limits and are "ok". */
export function limitStateOf(
  value: PhysicalValue,
  { lower, upper, extended }: ReadCharacteristic["limits"],
): LimitState {
  if (typeof value !== "number") return "ok";
  const inside = (low: number, high: number) => {
    const slack = ROUNDING * Math.max(Math.abs(low), Math.abs(high));
    return value >= low - slack && value <= high + slack;
  };
  if (inside(lower, upper)) return "ok";
  if (extended && inside(extended[0], extended[1])) return "extended";
  return value < lower ? "below" : "above";
}
