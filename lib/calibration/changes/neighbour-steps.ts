import { spanOf } from "@/lib/calibration/changes/effect";
import type { Pair } from "@/lib/calibration/changes/pair";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import type { ReadCharacteristic } from "@/lib/calibration/values/types";

/**
 * The largest step between neighbouring cells along any axis, before and after, both as a share of the span of the values before.
 * Null for one value, words, shared axes, a side that is not there and values without a span.
 */
export function neighbourSteps({ before, after }: Pair): CharacteristicChange["largestNeighbourStep"] {
  const span = before ? spanOf(before.values) : null;
  const share = (side: ReadCharacteristic | null) => {
    const step = side && side.axes.length > 0 ? largestStep(side) : null;
    const part = step === null || !span ? Number.NaN : step / span;
    return Number.isFinite(part) ? part : null;
  };
  return { before: share(before), after: share(after) };
}

function largestStep({ dims, values }: ReadCharacteristic): number | null {
  let largest: number | null = null;
  let stride = 1;
  for (const n of dims) {
    for (let cell = 0; cell < values.length; cell++) {
      if (Math.floor(cell / stride) % n === n - 1) continue;
      const [here, next] = [values[cell], values[cell + stride]];
      if (typeof here === "number" && typeof next === "number") {
        largest = Math.max(largest ?? 0, Math.abs(next - here));
      }
    }
    stride *= n;
  }
  return largest;
}
