import { VerdictMark } from "@/components/features/runs/verdict-mark";
import { numberText } from "@/components/ui/data/number-text";
import { type Column, Table } from "@/components/ui/data/table";
import { Card } from "@/components/ui/layout/card";
import { Notice } from "@/components/ui/status/notice";

interface Finding {
  code: string;
  message: string;
  from_s?: number;
  to_s?: number;
}

export interface VerdictCardProps {
  verdict: "waiting" | "usable" | "refused";
  reasons: readonly Finding[];
  notes: readonly Finding[];
  next: string | null;
  /** Set when the run is set aside: who, when, why, and whether its result could be seen then. */
  setAside: { by: string; at: string; reason: string; resultWasVisible: boolean } | null;
}

const seconds = (value: number) => numberText(value, { decimals: 2 });

function spanText({ from_s, to_s }: Finding): string {
  if (from_s === undefined) return "whole log";
  return to_s === undefined || to_s === from_s
    ? `${seconds(from_s)} s`
    : `${seconds(from_s)}–${seconds(to_s)} s`;
}

const NOTE_COLUMNS: Column<Finding>[] = [
  { key: "what", header: "What", rowHeader: true, cell: (note) => note.message },
  { key: "where", header: "Where", numeric: true, cell: spanText },
  { key: "code", header: "Code", cell: (note) => <code className="tabular text-13">{note.code}</code> },
];

/** Whether the run can be used, why not, and what was found on the way. */
export function VerdictCard({ verdict, reasons, notes, next, setAside }: VerdictCardProps) {
  return (
    <Card title="Verdict" id="verdict">
      <div className="flex flex-col gap-4">
        <p className="flex flex-wrap items-center gap-3 text-17">
          <VerdictMark verdict={verdict} setAside={false} />
          {setAside && <VerdictMark verdict={verdict} setAside />}
        </p>
        {setAside && (
          <Notice tone="caution" title={`Set aside by ${setAside.by}, ${setAside.at}`}>
            <p>{setAside.reason}</p>
            <p>
              {setAside.resultWasVisible
                ? "Its result could be seen then."
                : "Its result could not be seen yet then."}{" "}
              It counts in no comparison and stays listed.
            </p>
          </Notice>
        )}
        {verdict === "waiting" && (
          <p>The log is kept. The worker reads and analyses it; this page follows by itself.</p>
        )}
        {verdict === "refused" && reasons.length > 0 && (
          <ul className="flex flex-col gap-2">
            {reasons.map((reason) => (
              <li key={reason.code}>
                {reason.message} <code className="tabular text-13 text-ink2">{reason.code}</code>
              </li>
            ))}
          </ul>
        )}
        {next && (
          <p>
            <strong>Next: </strong>
            {next}
          </p>
        )}
        {notes.length > 0 && (
          <Table
            caption="Notes: what masks or warns"
            showCaption
            columns={NOTE_COLUMNS}
            rows={notes}
            rowKey={(note, index) => `${note.code}${index}`}
            dense
          />
        )}
        {verdict === "usable" && notes.length === 0 && (
          <p className="text-ink2">No gap, no wheel spin, nothing left out.</p>
        )}
      </div>
    </Card>
  );
}
