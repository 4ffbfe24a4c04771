import { NotReadable } from "@/lib/calibration/values/not-readable";
import type { SharedAxis } from "@/lib/calibration/values/reading-context";
import type { PhysicalValue } from "@/lib/calibration/values/types";

/**
 * Cells of a curve on a rescale axis. The last virtual index is the last cell where that fits; where it is the greatest number
 * of its data type, the virtual axis spans the whole range and has as many cells as the description states. A description that
 * states the number of pairs instead limits nothing. Throws NotReadable.
 */
export function cellsOfRescale(shared: SharedAxis, most: number): number {
  const last = lastIndex(shared);
  if (Number.isInteger(last) && last >= 0 && last < most) return last + 1;
  if (last === shared.fullScale && most >= 2) return most;
  if (Number.isInteger(last) && last >= 0 && most === shared.pairs?.length) return last + 1;
  throw new NotReadable(
    `the rescale pairs of ${shared.read.name} end at index ${last}, cells 0 to ${most - 1} are possible`,
  );
}

/**
 * Raw axis value at each cell, straight lines between the pairs; null where no axis value leads to the cell. Virtual axis over
 * the whole range: cells lie (greatest + 1) / (cells − 1) apart (from memory; the pairs of the demonstration image fit it).
 */
export function pointsOfRescale(shared: SharedAxis, cells: number): (number | null)[] {
  const pairs = shared.pairs ?? [];
  const last = lastIndex(shared);
  const step = last + 1 === cells ? 1 : (last + 1) / (cells - 1);
  const values = pairs.map(({ value }) => Number(value));
  const indices = pairs.map(({ index }) => index);
  const inputAt = inverse(indices, values);
  return Array.from({ length: cells }, (_, cell) => inputAt(Math.min(cell * step, last)));
}

function lastIndex({ pairs }: SharedAxis): number {
  return pairs?.[pairs.length - 1]?.index ?? Number.NaN;
}

/** Input at which a curve gives 0, 1, 2 …, the cells of what rests on it; null where it never or not only once does. */
export function pointsOfCurve(
  values: readonly PhysicalValue[],
  inputs: readonly PhysicalValue[],
  cells: number,
): (number | null)[] {
  const numbers = values.map((value) => (typeof value === "number" ? value : Number.NaN));
  const at = inputs.map((value) => (typeof value === "number" ? value : Number.NaN));
  const inputAt = inverse(numbers, at);
  return Array.from({ length: cells }, (_, cell) => inputAt(cell));
}

/**
 * Where a rising or falling broken line y(x) takes a value; null outside it or where it is not strictly monotone. O(points) once,
 * O(log points) a value.
 */
function inverse(y: readonly number[], x: readonly number[]): (wanted: number) => number | null {
  const sign = Math.sign(y[y.length - 1] - y[0]);
  for (let k = 1; k < y.length; k++) if (!(sign * (y[k] - y[k - 1]) > 0)) return () => null;
  if (y.length === 1) return (wanted) => (y[0] === wanted ? x[0] : null);
  return (wanted) => {
    // The first stretch whose end is not in front of the value.
    let low = 1;
    let high = y.length - 1;
    while (low < high) {
      const middle = (low + high) >>> 1;
      if (sign * (y[middle] - wanted) >= 0) high = middle;
      else low = middle + 1;
    }
    const part = (wanted - y[low - 1]) / (y[low] - y[low - 1]);
    if (!(part >= 0 && part <= 1)) return null;
    const found = part === 0 ? x[low - 1] : part === 1 ? x[low] : x[low - 1] + part * (x[low] - x[low - 1]);
    return Number.isFinite(found) ? found : null;
  };
}
