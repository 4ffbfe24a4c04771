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
  run: { number: number; verdict: "waiting" | "usable" | "refused"; other: string | null } | null;
  isNext: boolean;
}

function Driven({ number, verdict, other }: NonNullable<OrderCardRow["run"]>) {
  const run = `run ${number}`;
  if (verdict === "refused") return <StateMark state="not_met">{`${run} refused`}</StateMark>;
  if (other) return <StateMark state="too_little">{`${run}, but ${other}`}</StateMark>;
  return <StateMark state={verdict === "usable" ? "met" : "stale"}>{run}</StateMark>;
}

const COLUMNS: Column<OrderCardRow>[] = [
  { key: "place", header: "Place", numeric: true, rowHeader: true, cell: (row) => row.place },
  {
    key: "before",
    header: "Before it",
    cell: (row) =>
      row.writeBefore ? (
        <span>
          write <Tag tone="strong">{row.revision}</Tag>, settle
        </span>
      ) : (
        <span className="text-ink2">{row.leg === "back" ? "turn round" : "no write"}</span>
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
  {
    key: "twin",
    header: "Twin",
    numeric: true,
    className: "max-sm:hidden",
    cell: (row) => row.twin,
  },
  {
    key: "run",
    header: "Driven",
    cell: (row) => (row.run ? <Driven {...row.run} /> : row.isNext ? <strong>next</strong> : "–"),
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
