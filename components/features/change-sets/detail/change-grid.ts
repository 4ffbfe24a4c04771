import { differenceOf, digitsFor } from "@/components/features/change-sets/words/figure-text";
import type { CellChange, ChangeSide, CharacteristicChange } from "@/lib/calibration/changes/types";
import { cellNumber } from "@/lib/calibration/coverage/changed-cells";
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

export const AXIS_LETTERS = ["x", "y", "z", "4", "5"] as const;

/** Points of an axis as numbers; the places 0, 1, 2 … where a table has no axis there. */
export function pointAt(axis: ReadAxis | undefined, index: number): PhysicalValue {
  return axis ? (axis.points[index] ?? null) : index;
}

/** Name and unit of an axis: its input quantity in words where they are known. */
export function axisHead(
  side: ChangeSide,
  axis: number,
  quantityTexts: Readonly<Record<string, string>>,
): string {
  const described = side.axes[axis];
  const letter = AXIS_LETTERS[axis] ?? String(axis + 1);
  if (!described) return `place in ${letter}`;
  const quantity = described.inputQuantity;
  const name = (quantity && (quantityTexts[quantity] || quantity)) || described.reference || `${letter} axis`;
  return described.unit ? `${name}, ${described.unit}` : name;
}
