import type { ReadCharacteristic } from "@/lib/calibration/values/types";

/** A characteristic before and after; one of them is there. */
export interface Pair {
  before: ReadCharacteristic | null;
  after: ReadCharacteristic | null;
}
