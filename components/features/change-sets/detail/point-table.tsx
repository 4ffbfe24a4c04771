import {
  axisDigits,
  axisHead,
  type ChangeGrid,
  isMovedAxis,
  pointAt,
} from "@/components/features/change-sets/detail/change-grid";
import { LIMIT_MARKS } from "@/components/features/change-sets/words/change-words";
import { differenceText, valueText } from "@/components/features/change-sets/words/figure-text";
import { numberText } from "@/components/ui/data/number-text";
import { type Column, Table } from "@/components/ui/data/table";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import type { MapCoverage } from "@/lib/calibration/coverage/types";

/** Above this many places only those that changed are listed. */
const MOST_WHOLE = 200;
/** Places that are listed at most. */
const MOST_ROWS = 500;

export interface PointTableProps {
  change: CharacteristicChange;
  grid: ChangeGrid;
  coverage: MapCoverage | null;
}

/** A curve, a shared axis or a block place by place: before, after and the difference. */
export function PointTable({ change, grid, coverage }: PointTableProps) {
  const { before, after, unit } = change;
  const count = Math.max(before?.values.length ?? 0, after?.values.length ?? 0);
  const all = Array.from({ length: count }, (_, place) => place);
  const changed = [...grid.changedAt.keys()].sort((p, q) => p - q);
  const rows = (count > MOST_WHOLE ? changed : all).slice(0, MOST_ROWS);
  const never = new Set(coverage?.changedNeverVisited);
  const text = (side: typeof before, place: number) =>
    side && place < side.values.length ? valueText(side.values[place], grid.digits) : "–";
  const columns: Column<number>[] = [
    { key: "place", header: "Place", numeric: true, rowHeader: true, cell: (place) => numberText(place) },
    ...axisColumns(change),
    { key: "before", header: "Before", unit, numeric: true, cell: (place) => text(before, place) },
    { key: "after", header: "After", unit, numeric: true, cell: (place) => text(after, place) },
    ...(grid.isComparable ? [differenceColumn(change, grid)] : []),
    ...(coverage ? coverageColumns(coverage, never) : []),
  ];
  return (
    <div className="flex flex-col gap-2">
      <Table
        caption={`${change.name}, place by place`}
        dense
        scroll="tall"
        columns={columns}
        rows={rows}
        rowKey={(place) => String(place)}
        isSelected={(place) => grid.changedAt.has(place)}
        empty="No place changed."
      />
      {rows.length < count && (
        <p className="text-13 text-ink2">
          Of {numberText(count)} places only those that changed are listed
          {changed.length > rows.length &&
            `, the first ${numberText(rows.length)} of ${numberText(changed.length)}`}
          .
        </p>
      )}
    </div>
  );
}

/** One column where the points are the same, two where they moved. */
function axisColumns({ before, after }: CharacteristicChange): Column<number>[] {
  const side = after ?? before;
  const axis = side?.axes[0];
  if (!side || !axis) return [];
  const head = axisHead(side, 0);
  const digits = axisDigits(axis, before?.axes[0]);
  const column = (key: string, header: string, of: typeof axis | undefined): Column<number> => ({
    key,
    header,
    numeric: true,
    cell: (place) => valueText(pointAt(of ?? axis, place), digits),
  });
  const old = before?.axes[0];
  return old && after && isMovedAxis(axis, old)
    ? [column("axis-before", `${head}, before`, old), column("axis-after", `${head}, after`, axis)]
    : [column("axis", head, axis)];
}

function differenceColumn({ unit }: CharacteristicChange, grid: ChangeGrid): Column<number> {
  return {
    key: "difference",
    header: "After \u2212 before",
    unit,
    numeric: true,
    cell: (place) => {
      const cell = grid.changedAt.get(place);
      if (!cell) return "·";
      const limit = LIMIT_MARKS[cell.limit];
      return (
        <>
          {limit && (
            <span className="font-sans text-13">
              <span aria-hidden="true">{limit.glyph}</span> {limit.words}{" "}
            </span>
          )}
          {differenceText(cell.before, cell.after, grid.digits) ?? "changed"}
        </>
      );
    },
  };
}

function coverageColumns(coverage: MapCoverage, never: ReadonlySet<number>): Column<number>[] {
  return [
    {
      key: "seconds",
      header: "Runs there",
      unit: "s",
      numeric: true,
      cell: (place) => numberText(coverage.secondsByCell[place], { decimals: 1 }),
    },
    {
      key: "visits",
      header: "Visits",
      numeric: true,
      cell: (place) => (never.has(place) ? "never" : numberText(coverage.visitsByCell[place])),
    },
  ];
}
