import Link from "next/link";
import { Fingerprint } from "@/components/ui/data/fingerprint";
import { Table } from "@/components/ui/data/table";
import { Tag } from "@/components/ui/data/tag";

interface EvidenceRun {
  runId: string;
  number: number;
  logSha256: string;
  side: string;
  usable: boolean;
  testerName: string | null;
  leftOut: string | null;
}

/** The exact runs of the evidence with the fingerprints of their logs. */
export function RecordRuns({ runs }: { runs: readonly EvidenceRun[] }) {
  return (
    <Table
      caption="Runs of the evidence"
      dense
      scroll="tall"
      rows={runs}
      rowKey={(run) => run.runId}
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
        { key: "tester", header: "Driven for", cell: (run) => run.testerName ?? "somebody" },
        { key: "log", header: "Log", cell: (run) => <Fingerprint value={run.logSha256} /> },
        {
          key: "counts",
          header: "Counts?",
          className: "min-w-40",
          cell: (run) => (run.usable ? "counts" : (run.leftOut ?? "left out")),
        },
      ]}
    />
  );
}
