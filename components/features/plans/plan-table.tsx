import type { Route } from "next";
import Link from "next/link";
import { numberText } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import type { PlanRow } from "@/lib/services/plans/schema";

export interface PlanTableProps {
  rows: readonly PlanRow[];
  chosen: number;
  /** Address of the page with another number of twins. */
  hrefFor: (twins: number) => string;
}

const pct = (value: number | null) => numberText(value, { decimals: 2 });

/** What each number of twins shows, and what it costs. */
export function PlanTable({ rows, chosen, hrefFor }: PlanTableProps) {
  return (
    <Table
      caption="Smallest difference shown with a chance of 80 %, and the cost, by twins a side"
      dense
      rows={rows}
      rowKey={(row) => String(row.twins)}
      isSelected={(row) => row.twins === chosen}
      columns={[
        {
          key: "twins",
          header: "Twins a side",
          numeric: true,
          rowHeader: true,
          cell: (row) => (
            <Link
              href={hrefFor(row.twins) as Route}
              className="link inline-flex min-h-6 items-center"
              aria-current={row.twins === chosen ? "true" : undefined}
            >
              {row.twins}
            </Link>
          ),
        },
        {
          key: "range",
          header: "Shows over a range",
          unit: "%",
          numeric: true,
          cell: (row) => pct(row.rangePct),
        },
        {
          key: "curve",
          header: "Shows anywhere on the curve",
          unit: "%",
          numeric: true,
          cell: (row) => pct(row.curvePct),
        },
        { key: "runs", header: "Runs", numeric: true, cell: (row) => row.cost.runs },
        { key: "writes", header: "Writes", numeric: true, cell: (row) => row.cost.writes },
        { key: "settle", header: "Settling drives", numeric: true, cell: (row) => row.cost.settlingDrives },
        {
          key: "minutes",
          header: "Time",
          unit: "min",
          numeric: true,
          cell: (row) => numberText(row.cost.minutes),
        },
        {
          key: "fuel",
          header: "Fuel",
          unit: "l",
          numeric: true,
          cell: (row) => numberText(row.cost.fuelL, { decimals: 1 }),
        },
        {
          key: "metres",
          header: "Way",
          unit: "m",
          numeric: true,
          cell: (row) => numberText(row.cost.metres),
        },
      ]}
    />
  );
}
