import type { ChangeSide, CharacteristicChange } from "@/lib/calibration/changes/types";
import { cellCount, cellIndex, cellNumber } from "@/lib/calibration/values/cells";

/** Axis points that differ from the side before, as flags; all where there were none or another number of them. */
function movedPoints(before: ChangeSide, after: ChangeSide, axis: number): boolean[] | null {
  const [old, now] = [before.axes[axis], after.axes[axis]];
  if (!old || !now) return null;
  const moved = now.raw.map((raw, k) => raw !== old.raw[k] || now.points[k] !== old.points[k]);
  return moved.includes(true) ? moved : null;
}

/**
 * Flags of the cells of the side after that hold something else than before, x fastest: those whose value changed and those at an
 * axis point that moved. All of a table that is new or has another shape; none where there is no side after.
 */
export function changedCellFlags(change: CharacteristicChange): Uint8Array {
  const { before, after } = change;
  if (!after) return new Uint8Array(0);
  const flags = new Uint8Array(cellCount(after.dims));
  if (!before || change.shapeChanged) return flags.fill(1);
  for (const { index } of change.changes) flags[cellNumber(index, after.dims)] = 1;
  if (change.axisChanged)
    after.axes.forEach((_, axis) => {
      const moved = movedPoints(before, after, axis);
      if (moved)
        for (let k = 0; k < flags.length; k++) if (moved[cellIndex(k, after.dims)[axis]]) flags[k] = 1;
    });
  return flags;
}
