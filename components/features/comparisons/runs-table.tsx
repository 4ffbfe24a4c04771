import Link from "next/link";
import { numberText } from "@/components/ui/data/number-text";
import { Quantity } from "@/components/ui/data/quantity";
import { Table } from "@/components/ui/data/table";
import { Tag } from "@/components/ui/data/tag";
import type { RunLine } from "@/lib/services/comparisons/schema";

const OUTCOME: Record<RunLine["outcome"], string> = {
  used: "counts",
  refused: "refused",
  "set aside": "set aside",
  "left out": "left out",
  "not computed yet": "not computed yet",
};

/** Every run of both sides in the order driven: what counts, and what was left out with the reason. */
export function RunsTable({ runs }: { runs: readonly RunLine[] }) {
  return (
    <Table
      caption="Runs of both sides in the order driven"
      dense
      scroll="tall"
      rows={runs}
      rowKey={(run) => run.runId}
      empty="No run is attached to either side yet."
      columns={[
        {
          key: "run",
          header: "Run",
          rowHeader: true,
          cell: (run) => (
            <Link href={`/runs/${run.runId}`} className="link tabular">
              {run.number}
            </Link>
          ),
        },
        {
          key: "side",
          header: "Side",
          cell: (run) => <Tag tone={run.side === "B" ? "strong" : "plain"}>{run.side}</Tag>,
        },
        { key: "day", header: "Road day", className: "whitespace-nowrap", cell: (run) => run.day },
        { key: "order", header: "Order", numeric: true, cell: (run) => run.order },
        {
          key: "leg",
          header: "Kind, leg",
          className: "whitespace-nowrap",
          cell: (run) => `${run.kind}, ${run.leg}`,
        },
        { key: "gear", header: "Gear", numeric: true, cell: (run) => numberText(run.gear) },
        {
          key: "peak",
          header: "Peak, air of the day",
          unit: "kW",
          numeric: true,
          cell: (run) => (
            <Quantity value={run.peakKw} unit="" halfWidth={run.peakUncertaintyKw} decimals={1} orNotStated />
          ),
        },
        {
          key: "outcome",
          header: "Counts?",
          className: "min-w-56",
          cell: (run) => (
            <>
              <span className={run.outcome === "used" ? "" : "font-semibold"}>{OUTCOME[run.outcome]}</span>
              {run.why.length > 0 && <span className="block text-13 text-ink2">{run.why.join(" ")}</span>}
              {run.notes.length > 0 && (
                <span className="block text-13 text-ink2">Noted: {run.notes.join(" ")}</span>
              )}
            </>
          ),
        },
      ]}
    />
  );
}
