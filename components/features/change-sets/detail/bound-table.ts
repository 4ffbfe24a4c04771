import { pointAt } from "@/components/features/change-sets/detail/change-grid";
import { numberText } from "@/components/ui/data/number-text";
import type { ChangeSide, CharacteristicChange } from "@/lib/calibration/changes/types";
import type { MapCoverage } from "@/lib/calibration/coverage/types";
import { cellCount, cellIndex, cellNumber } from "@/lib/calibration/values/cells";
import type { ReadAxis } from "@/lib/calibration/values/types";

/** A table with more cells is drawn by those lines that hold a change, and at most by as many cells as this. */
export const MOST_CELLS = 8192;

export interface BoundTable {
  change: CharacteristicChange;
  coverage: MapCoverage | null;
  /** Says what was left out; null when nothing was. */
  leftOut: string | null;
}

/** Lines of each axis that hold a change, the longest cut until the product fits; without changes the first lines. */
function keptLines(dims: readonly number[], indices: readonly (readonly number[])[]): number[][] {
  const kept = dims.map((count, axis) => {
    const changed = [...new Set(indices.map((index) => index[axis] ?? 0))].sort((p, q) => p - q);
    return changed.length > 0
      ? changed
      : Array.from({ length: Math.min(count, MOST_CELLS) }, (_, line) => line);
  });
  const cells = () => cellCount(kept.map((lines) => lines.length));
  while (cells() > MOST_CELLS) {
    const longest = kept.reduce(
      (most, lines, axis) => (lines.length > (kept[most]?.length ?? 0) ? axis : most),
      0,
    );
    const lines = kept[longest] ?? [];
    kept[longest] = lines.slice(0, Math.max(1, Math.floor((MOST_CELLS * lines.length) / cells())));
  }
  return kept;
}

/** Numbers in the whole table of the cells that are kept, in the order of the smaller one. */
function keptCells(dims: readonly number[], kept: readonly number[][]): number[] {
  const smaller = kept.map((lines) => lines.length);
  return Array.from({ length: cellCount(smaller) }, (_, cell) =>
    cellNumber(
      cellIndex(cell, smaller).map((at, axis) => kept[axis]?.[at] ?? 0),
      dims,
    ),
  );
}

/** An axis by its kept lines; where a table has none, the places become its points. */
function boundAxis(axis: ReadAxis | undefined, lines: readonly number[]): ReadAxis {
  const bare = { kind: "FIX_AXIS", reference: null, inputQuantity: null, unit: "", decimals: 0 } as const;
  return {
    ...(axis ?? bare),
    points: lines.map((line) => pointAt(axis, line)),
    raw: lines.map((line) => axis?.raw[line] ?? line),
  };
}

function boundSide(side: ChangeSide | null, kept: readonly number[][]): ChangeSide | null {
  return (
    side && {
      ...side,
      dims: kept.map((lines) => lines.length),
      axes: kept.map((lines, axis) => boundAxis(side.axes[axis], lines)),
      values: keptCells(side.dims, kept).map((cell) => side.values[cell] ?? null),
    }
  );
}

/** The same change by fewer cells where its table is too large for a page; as it is where it is not. */
export function boundTable(change: CharacteristicChange, coverage: MapCoverage | null): BoundTable {
  const { before, after } = change;
  const dims = (after ?? before)?.dims ?? [];
  const whole = Math.max(...[before, after].map((side) => (side ? cellCount(side.dims) : 0)));
  if (whole <= MOST_CELLS) return { change, coverage, leftOut: null };
  const kept = keptLines(
    dims,
    change.changes.map((cell) => cell.index),
  );
  const places = kept.map((lines) => new Map(lines.map((line, at) => [line, at])));
  const within = (index: readonly number[]) => index.map((line, axis) => places[axis]?.get(line) ?? -1);
  const changes = change.changes
    .map((cell) => ({ ...cell, index: within(cell.index) }))
    .filter(({ index }) => !index.includes(-1));
  const cells = keptCells(dims, kept);
  const never = new Set(coverage?.changedNeverVisited);
  return {
    change: { ...change, changes, before: boundSide(before, kept), after: boundSide(after, kept) },
    coverage: coverage && {
      ...coverage,
      dims: kept.map((lines) => lines.length),
      secondsByCell: cells.map((cell) => coverage.secondsByCell[cell] ?? 0),
      visitsByCell: cells.map((cell) => coverage.visitsByCell[cell] ?? 0),
      changedNeverVisited: cells.flatMap((cell, at) => (never.has(cell) ? [at] : [])),
    },
    leftOut: `A table of ${numberText(whole)} cells: only lines that hold a change are drawn, ${kept.map((lines, axis) => `${numberText(lines.length)} of ${numberText(dims[axis])}`).join(" × ")}.${
      changes.length < change.changes.length
        ? ` Of ${numberText(change.changes.length)} changed cells ${numberText(changes.length)} are drawn; the downloads hold all.`
        : ""
    }`,
  };
}
