import Link from "next/link";
import { Table } from "@/components/ui/data/table";

export interface RevisionRun {
  id: string;
  number: number;
  kind: string;
  leg: string;
  driveOrder: number;
  state: string;
  setAsideAt: Date | null;
  testerName: string;
}

/** Runs that were driven with a revision. */
export function RevisionRuns({ runs }: { runs: readonly RevisionRun[] }) {
  return (
    <Table
      caption="Runs driven with this revision"
      rows={runs}
      rowKey={(run) => run.id}
      empty="No run yet. A tester attaches runs on a road day."
      columns={[
        {
          key: "number",
          header: "Run",
          rowHeader: true,
          cell: (run) => (
            <Link className="link" href={`/runs/${run.id}`}>
              Run {run.number}
            </Link>
          ),
        },
        { key: "kind", header: "Kind", cell: (run) => run.kind },
        { key: "leg", header: "Leg", cell: (run) => run.leg },
        { key: "order", header: "Order", numeric: true, cell: (run) => run.driveOrder },
        { key: "state", header: "Verdict", cell: (run) => (run.setAsideAt ? "set aside" : run.state) },
        { key: "tester", header: "Tester", cell: (run) => run.testerName },
      ]}
    />
  );
}
