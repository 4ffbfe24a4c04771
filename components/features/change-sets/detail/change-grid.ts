import { differenceOf, digitsFor } from "@/components/features/change-sets/words/figure-text";
import type { CellChange, ChangeSide, CharacteristicChange } from "@/lib/calibration/changes/types";
import { AXIS_NAMES, cellNumber } from "@/lib/calibration/values/cells";
import type { PhysicalValue, ReadAxis } from "@/lib/calibration/values/types";

/** A changed characteristic, ready to be drawn cell by cell. */
export interface ChangeGrid {
  /** The side whose shape is drawn: after, or before where there is no after. */
  shape: ChangeSide;
  /** Whether before and after can be compared cell by cell. */
  isComparable: boolean;
  changedAt: ReadonlyMap<number, CellChange>;
  /** Digits behind the point that every difference can be seen in. */
  digits: number;
  /** Size of the largest difference. */
  largest: number;
}

/** Null where neither side has values. */
export function changeGrid(change: CharacteristicChange): ChangeGrid | null {
  const shape = change.after ?? change.before;
  if (!shape) return null;
  const differences = change.changes.flatMap((cell) => differenceOf(cell.before, cell.after) ?? []);
  return {
    shape,
    isComparable: change.before !== null && change.after !== null && !change.shapeChanged,
    changedAt: new Map(change.changes.map((cell) => [cellNumber(cell.index, shape.dims), cell])),
    digits: digitsFor(differences, change.decimals),
    largest: differences.reduce((most, difference) => Math.max(most, Math.abs(difference)), 0),
  };
}

/** Points of an axis as numbers; the places 0, 1, 2 … where a table has no axis there. */
export function pointAt(axis: ReadAxis | undefined, index: number): PhysicalValue {
  return axis ? (axis.points[index] ?? null) : index;
}

/** What an axis is called: its input quantity, else the shared axis it rests on, else its letter. */
export function axisName(side: ChangeSide, axis: number): string {
  const described = side.axes[axis];
  const letter = AXIS_NAMES[axis] ?? String(axis + 1);
  return described
    ? described.inputQuantity || described.reference || `${letter} axis`
    : `place in ${letter}`;
}

/** Name and unit of an axis. */
export function axisHead(side: ChangeSide, axis: number): string {
  const unit = side.axes[axis]?.unit;
  return unit ? `${axisName(side, axis)}, ${unit}` : axisName(side, axis);
}

/** Whether a point of an axis is another one than before, stored otherwise or read otherwise. */
export function isMovedPoint(axis: ReadAxis, old: ReadAxis, index: number): boolean {
  return old.raw[index] !== axis.raw[index] || old.points[index] !== axis.points[index];
}

/** Whether any point of an axis moved, came or went. */
export function isMovedAxis(axis: ReadAxis, old: ReadAxis): boolean {
  return old.raw.length !== axis.raw.length || axis.raw.some((_, index) => isMovedPoint(axis, old, index));
}

/** Digits behind the point such that no moved point of an axis looks as before. */
export function axisDigits(axis: ReadAxis | undefined, old: ReadAxis | undefined): number {
  if (!axis) return 0;
  return digitsFor(
    axis.points.flatMap((point, i) => differenceOf(old?.points[i], point) ?? []),
    axis.decimals,
  );
}
