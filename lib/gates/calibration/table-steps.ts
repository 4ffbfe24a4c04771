import { spanOf } from "@/lib/calibration/changes/effect";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import { changedCellFlags } from "@/lib/calibration/coverage/changed-cells";
import { cellIndex } from "@/lib/calibration/values/cells";
import type { PhysicalValue } from "@/lib/calibration/values/types";

/** A difference of two values, in the table's unit, and where: cell `index` and, for a step, its neighbour `next`. */
export interface TableStep {
  size: number;
  index: number[];
  next: number[] | null;
  from: number;
  to: number;
}

const isNumber = (value: PhysicalValue | undefined): value is number =>
  typeof value === "number" && Number.isFinite(value);

/** What a share of a table refers to: the span of its values before, or their size where all are alike; null for none or zero. */
export function shareBase({ before }: CharacteristicChange): number | null {
  const numbers = (before?.values ?? []).filter(isNumber);
  return spanOf(numbers) || Math.abs(numbers[0] ?? 0) || null;
}

/**
 * The largest step between two cells that are neighbours along an axis of the side after, of which at least one changed (its value,
 * or its axis point). Null for what has no axes or no two numbers side by side.
 */
export function largestStep(change: CharacteristicChange): TableStep | null {
  const { after } = change;
  if (!after || after.axes.length === 0) return null;
  const changed = changedCellFlags(change);
  let worst: TableStep | null = null;
  let stride = 1;
  for (let axis = 0; axis < after.dims.length; axis++) {
    for (let cell = 0; cell + stride < after.values.length; cell++) {
      const [from, to] = [after.values[cell], after.values[cell + stride]];
      if (!changed[cell] && !changed[cell + stride]) continue;
      if (!isNumber(from) || !isNumber(to)) continue;
      const index = cellIndex(cell, after.dims);
      if (index[axis] + 1 >= after.dims[axis]) continue;
      const size = Math.abs(to - from);
      if (!worst || size > worst.size)
        worst = { size, index, next: cellIndex(cell + stride, after.dims), from, to };
    }
    stride *= after.dims[axis];
  }
  return worst;
}

/** The cell that moved most; null where none is a number on both sides. */
export function largestMove(change: CharacteristicChange): TableStep | null {
  let worst: TableStep | null = null;
  for (const { index, before, after } of change.changes) {
    if (!isNumber(before) || !isNumber(after)) continue;
    const size = Math.abs(after - before);
    if (!worst || size > worst.size) worst = { size, index, next: null, from: before, to: after };
  }
  return worst;
}
