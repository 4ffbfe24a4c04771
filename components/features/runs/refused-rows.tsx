import { Download } from "lucide-react";
import { buttonStyle } from "@/components/ui/action/button-style";
import { numberText } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import { Card } from "@/components/ui/layout/card";
import type { RefusedRows } from "@/lib/measure/run/traces";

export interface RefusedRowsCardProps {
  runId: string;
  refused: RefusedRows;
  /** Why the list can't be downloaded; null when it can. */
  blockedBecause: string | null;
}

/** The rows of the log that the run went on without: the first five, and all of them as a file. */
export function RefusedRowsCard({ runId, refused, blockedBecause }: RefusedRowsCardProps) {
  const { total, atLeast, first } = refused;
  const count = `${atLeast ? "at least " : ""}${numberText(total)} bad ${total === 1 ? "row" : "rows"}`;
  return (
    <Card
      title="Rows left out"
      description={`The run went on without ${count}. Nothing is filled in for ${total === 1 ? "it" : "them"}.`}
      id="refused-rows"
    >
      <div className="flex flex-col gap-3">
        <Table
          caption={`First ${first.length} of the rows left out`}
          dense
          columns={[
            { key: "row", header: "Row", numeric: true, rowHeader: true, cell: (row) => row.row },
            { key: "column", header: "Column", cell: (row) => row.column ?? "–" },
            {
              key: "raw",
              header: "Raw text",
              cell: (row) => <code className="break-all">{row.raw ?? ""}</code>,
            },
            { key: "reason", header: "Reason", cell: (row) => row.reason },
          ]}
          rows={first}
          rowKey={(row) => `${row.row}`}
        />
        {blockedBecause === null && (
          <a
            href={`/api/runs/${runId}/refused-rows`}
            download
            className={buttonStyle("outlined", "normal", false, "self-start")}
          >
            <Download aria-hidden size={18} />
            Download all as CSV
          </a>
        )}
      </div>
    </Card>
  );
}
