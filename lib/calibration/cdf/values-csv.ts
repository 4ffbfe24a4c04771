import { limitStateOf } from "@/lib/calibration/changes/limit-state";
import type {
  ChangeSet,
  ChangeSide,
  CharacteristicChange,
  LimitState,
} from "@/lib/calibration/changes/types";
import { AXIS_NAMES, cellIndex } from "@/lib/calibration/values/cells";
import type {
  ImageReading,
  PhysicalValue,
  ReadAxis,
  ReadCharacteristic,
} from "@/lib/calibration/values/types";
import { csvText } from "@/lib/format/csv-text";

type Cell = string | number | null;
/** What places a row: its axes, and the cell by axis, from 0. */
interface Place {
  axes: readonly ReadAxis[];
  /** NaN = not along this axis. */
  index: readonly number[];
}

const AXIS_TITLES = AXIS_NAMES.flatMap((axis) => [`${axis} index`, `${axis} value`, `${axis} unit`]);
const LIMITS: Readonly<Record<LimitState, string>> = {
  ok: "inside",
  extended: "inside the extended limits only",
  below: "below the lower limit",
  above: "above the upper limit",
};

/**
 * All values of a reading as CSV (RFC 4180), one row a cell, in pieces of some rows: point as decimal mark, an empty cell where there is
 * no value. What could not be read stands at the end with its reason.
 */
export function* readingCsv(reading: ImageReading): Generator<string> {
  yield csvText([["name", ...AXIS_TITLES, "value", "unit", "limit", "functions", "remark"]]);
  for (const of of reading.characteristics) yield* piecesOf(readingRows(of));
  yield* piecesOf(
    reading.notRead.map(({ name, reason }) => [
      name,
      ...placed({ axes: [], index: [] }),
      null,
      null,
      null,
      null,
      `not read: ${reason}`,
    ]),
  );
}

/**
 * The changed cells of a change set as CSV, likewise, and the points of own axes that moved ("axis x" under `change`); of what was
 * added, removed or has another shape every cell of each side.
 */
export function* changesCsv(changes: ChangeSet): Generator<string> {
  const titles = ["before", "after", "difference", "unit", "limit after", "functions"];
  yield csvText([["name", "change", ...AXIS_TITLES, ...titles]]);
  for (const change of changes.characteristics) yield* piecesOf(changeRows(change));
}

function* readingRows(of: ReadCharacteristic): Generator<Cell[]> {
  const { axes, dims, limits, unit, characters } = of;
  const functions = of.functions.join(", ");
  for (const { index, value } of cellsOf({ axes, dims, values: of.values, characters })) {
    const limit = LIMITS[limitStateOf(value, limits)];
    yield [of.name, ...placed({ axes, index }), value, unit, limit, functions, null];
  }
}

function* changeRows(change: CharacteristicChange): Generator<Cell[]> {
  const { name, before, after, kind, changes } = change;
  const functions = change.functions.join(", ");
  const line = (at: Place, from: PhysicalValue, to: PhysicalValue, over: Partial<Shown> = {}): Cell[] => {
    const { what, unit, limit } = { what: kind, unit: change.unit, limit: "", ...over };
    const difference = typeof from === "number" && typeof to === "number" ? to - from : null;
    return [name, what, ...placed(at), from, to, difference, unit, limit, functions];
  };
  // Cells that only one side has, or of other shapes, do not stand for each other.
  function* eachSide() {
    for (const { value, ...at } of cellsOf(before)) yield line(at, value, null);
    for (const { value, ...at } of cellsOf(after)) yield line(at, null, value);
  }
  if (!before || !after) return yield* eachSide();
  for (const { axis, index, from, to, unit } of movedPoints(before, after))
    yield line({ axes: [], index }, from, to, { what: `axis ${axis}`, unit });
  for (const { index, before: from, after: to, limit } of changes)
    yield line({ axes: after.axes, index }, from, to, { limit: LIMITS[limit] });
  if (before.characters !== null && after.characters !== null)
    yield line({ axes: [], index: [] }, before.characters, after.characters);
  else if (change.shapeChanged) yield* eachSide();
}

/** What a row of a change says beside its place and values. */
interface Shown {
  what: string;
  unit: string;
  limit: string;
}

/** Points of own axes that moved; shared axes are changes of their own, and other numbers of points another shape. */
function movedPoints(before: ChangeSide, after: ChangeSide) {
  return after.axes.flatMap((axis, k) => {
    const old = before.axes[k]?.points ?? [];
    if (axis.reference !== null || old.length !== axis.points.length) return [];
    return axis.points.flatMap((to, point) => {
      const index = Array.from({ length: k + 1 }, (_, at) => (at === k ? point : Number.NaN));
      return old[point] === to ? [] : [{ axis: AXIS_NAMES[k], index, from: old[point], to, unit: axis.unit }];
    });
  });
}

function* cellsOf(side: ChangeSide | null): Generator<Place & { value: PhysicalValue }> {
  if (!side) return;
  const { axes, dims, values, characters } = side;
  if (characters !== null) yield { axes, index: [], value: characters };
  else for (const [cell, value] of values.entries()) yield { axes, index: cellIndex(cell, dims), value };
}

/** Index, point and unit of each axis; empty where the cell has no such axis. */
function placed({ axes, index }: Place): Cell[] {
  return AXIS_NAMES.flatMap((_, k): Cell[] => {
    const at = index[k] ?? Number.NaN;
    return Number.isNaN(at) ? [null, null, null] : [at, axes[k]?.points[at] ?? null, axes[k]?.unit ?? null];
  });
}

/** Rows of one piece: a large block must stand in memory neither as rows nor as text. */
const ROWS_OF_A_PIECE = 1000;

function* piecesOf(rows: Iterable<Cell[]>): Generator<string> {
  let some: Cell[][] = [];
  for (const row of rows) {
    if (some.length === ROWS_OF_A_PIECE) {
      yield csvText(some);
      some = [];
    }
    some.push(row);
  }
  if (some.length > 0) yield csvText(some);
}
