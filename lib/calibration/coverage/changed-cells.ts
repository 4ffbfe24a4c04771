import type { ChangeSide, CharacteristicChange } from "@/lib/calibration/changes/types";

/** Number of cells of a side; one value has one. */
export function cellCount(dims: readonly number[]): number {
  return dims.reduce((product, n) => product * n, 1);
}

/** Number of a cell by its place on the axes: x fastest, then y, then z. */
export function cellNumber(index: readonly number[], dims: readonly number[]): number {
  let number = 0;
  for (let axis = dims.length - 1; axis >= 0; axis--) number = number * dims[axis] + (index[axis] ?? 0);
  return number;
}

/** Place on the axes of a cell by its number. */
export function cellIndex(number: number, dims: readonly number[]): number[] {
  let rest = number;
  return dims.map((n) => {
    const place = rest % n;
    rest = (rest - place) / n;
    return place;
  });
}

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
