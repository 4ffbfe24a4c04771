import { heatStep } from "@/components/charts/heat/heat-ramp";
import type { HeatAxis, HeatCell } from "@/components/charts/heat/heat-table";
import {
  axisDigits,
  axisHead,
  type ChangeGrid,
  isMovedPoint,
  pointAt,
} from "@/components/features/change-sets/detail/change-grid";
import { LIMIT_MARKS } from "@/components/features/change-sets/words/change-words";
import { differenceOf, differenceText, valueText } from "@/components/features/change-sets/words/figure-text";
import { numberText } from "@/components/ui/data/number-text";
import type { ChangeSide, CharacteristicChange } from "@/lib/calibration/changes/types";
import type { MapCoverage } from "@/lib/calibration/coverage/types";
import { cellNumber } from "@/lib/calibration/values/cells";
import type { ReadAxis } from "@/lib/calibration/values/types";

/** What the cells of a heat table hold. */
export type ShownSide = "difference" | "before" | "after";

export interface HeatQuestion {
  side: ShownSide;
  /** Indices on the third and further axes. */
  plane: readonly number[];
  coverage: MapCoverage | null;
  /** Print time and visits in every cell. */
  withVisits: boolean;
}

export interface HeatView {
  x: HeatAxis;
  y: HeatAxis;
  cells: HeatCell[][];
}

const range = (count: number) => Array.from({ length: count }, (_, index) => index);

function heatAxis(
  change: CharacteristicChange,
  side: ChangeSide,
  axis: number,
  question: HeatQuestion,
): HeatAxis {
  const described = side.axes[axis];
  const other = question.side === "difference" ? change.before?.axes[axis] : undefined;
  const digits = axisDigits(change.after?.axes[axis] ?? described, change.before?.axes[axis]);
  const text = (from: ReadAxis | undefined, index: number) => valueText(pointAt(from, index), digits);
  const moved = (index: number) =>
    other !== undefined && described !== undefined && isMovedPoint(described, other, index);
  const shown = range(side.dims[axis] ?? 1);
  const isMoved = shown.some(moved);
  return {
    head: axisHead(side, axis),
    points: shown.map((index) => text(described, index)),
    ...(isMoved && { was: shown.map((index) => (moved(index) ? text(other, index) : null)) }),
  };
}

function coverageLine(coverage: MapCoverage, at: number): string {
  const seconds = coverage.secondsByCell[at] ?? 0;
  return `${numberText(seconds, { decimals: seconds > 0 && seconds < 100 ? 1 : 0 })}\u202fs, ${numberText(coverage.visitsByCell[at])}×`;
}

/** One plane of a changed table as its heat table shows it. Ink always tells the difference; the numbers follow `side`. */
export function heatView(change: CharacteristicChange, grid: ChangeGrid, question: HeatQuestion): HeatView {
  const { plane, coverage, withVisits } = question;
  const side = (question.side === "before" ? change.before : change.after) ?? grid.shape;
  const never = new Set(coverage?.changedNeverVisited);
  const [columns, rows] = [range(side.dims[0] ?? 1), range(side.dims[1] ?? 1)];
  const cell = (column: number, row: number): HeatCell => {
    const at = cellNumber([column, row, ...plane], side.dims);
    const changed = grid.isComparable ? grid.changedAt.get(at) : undefined;
    const difference = changed ? differenceOf(changed.before, changed.after) : null;
    const limit = changed && question.side !== "before" ? LIMIT_MARKS[changed.limit] : null;
    return {
      text: cellText(side, at, changed, question.side, grid.digits),
      step: heatStep(difference, grid.largest),
      ...(limit && { mark: limit }),
      ...(changed && difference === null && { isEdged: true }),
      ...(never.has(at) && { isUnvisited: true }),
      ...(withVisits && coverage && { below: coverageLine(coverage, at) }),
    };
  };
  return {
    x: heatAxis(change, side, 0, question),
    y: heatAxis(change, side, 1, question),
    cells: rows.map((row) => columns.map((column) => cell(column, row))),
  };
}

function cellText(
  side: ChangeSide,
  at: number,
  changed: CharacteristicChange["changes"][number] | undefined,
  shown: ShownSide,
  digits: number,
): string {
  if (shown !== "difference") return valueText(side.values[at], digits);
  if (!changed) return "·";
  const { before, after } = changed;
  return (
    differenceText(before, after, digits) ?? `${valueText(before, digits)} → ${valueText(after, digits)}`
  );
}
