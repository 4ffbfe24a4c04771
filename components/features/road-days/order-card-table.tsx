import { type Column, Table } from "@/components/ui/data/table";
import { Tag } from "@/components/ui/data/tag";
import { StateMark } from "@/components/ui/status/state-mark";

export interface OrderCardRow {
  place: number;
  twin: number;
  /** E.g. "R15". */
  revision: string;
  side: "A" | "B";
  leg: "out" | "back";
  writeBefore: boolean;
  /** The run that has this place; `other` = it was driven otherwise than the card says, in words. */
  run: { number: number; other: string | null } | null;
  isNext: boolean;
}

const COLUMNS: Column<OrderCardRow>[] = [
  { key: "place", header: "Place", numeric: true, rowHeader: true, cell: (row) => row.place },
  {
    key: "before",
    header: "Before it",
    cell: (row) =>
      row.writeBefore ? (
        <span>
          Write <Tag tone="strong">{row.revision}</Tag>, then one settling drive
        </span>
      ) : (
        <span className="text-ink2">{row.leg === "back" ? "turn round" : "nothing"}</span>
      ),
  },
  {
    key: "drive",
    header: "Drive",
    cell: (row) => (
      <span className="whitespace-nowrap">
        <Tag>{row.revision}</Tag> {row.leg}
      </span>
    ),
  },
  { key: "twin", header: "Twin", numeric: true, cell: (row) => row.twin },
  {
    key: "run",
    header: "Driven",
    cell: (row) => {
      if (!row.run) return row.isNext ? <strong>next</strong> : <span className="text-ink2">–</span>;
      if (row.run.other) {
        return <StateMark state="too_little">{`run ${row.run.number}: ${row.run.other}`}</StateMark>;
      }
      return <StateMark state="met">{`run ${row.run.number}`}</StateMark>;
    },
  },
];

/** What to drive next, place by place, with what was driven so far. */
export function OrderCardTable({ rows }: { rows: readonly OrderCardRow[] }) {
  return (
    <Table
      caption="Order card: what to drive, in twins"
      columns={COLUMNS}
      rows={rows}
      rowKey={(row) => String(row.place)}
      isSelected={(row) => row.isNext}
      dense
    />
  );
}
