import { numberText } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import { Card } from "@/components/ui/layout/card";
import type { LogPreview } from "@/lib/logs/preview/preview-log";
import { previewWords } from "@/lib/logs/preview/preview-words";

/** The first rows of values, cell by cell, as the import takes them. */
export function RowsAsParsed({ preview }: { preview: LogPreview }) {
  const { columns, rows, rowsRefused, wholeFile, rowsRead, time } = preview;
  const { remarks } = previewWords(preview);
  const rate = time ? `, ${numberText(time.rateHz, { decimals: time.rateHz < 10 ? 1 : 0 })} a second` : "";
  return (
    <Card
      title="First rows as parsed"
      description={`${numberText(rowsRead)} rows read${rate}${wholeFile ? "" : " of the beginning of the file"}; the import parses the same way.`}
      id="rows"
      flush
    >
      <Table
        caption="First rows as parsed"
        dense
        scroll="tall"
        columns={columns.map((column, index) => ({
          key: `${index}`,
          header: column.title || `column ${index + 1}`,
          className: "tabular whitespace-nowrap",
          cell: (row: string[]) => row[index] ?? "",
        }))}
        rows={rows}
        rowKey={(_, index) => `${index}`}
        empty="No row of values was found."
      />
      {rowsRefused.length > 0 && (
        <ul aria-label="Refused rows" className="flex flex-col gap-1 border-line border-t px-4 py-3 text-13">
          {rowsRefused.map((refused) => (
            <li key={refused.row}>
              Row {refused.row} {refused.reason}
              {refused.raw !== undefined && refused.raw !== "" && (
                <>
                  : <code className="tabular">{refused.raw.slice(0, 40)}</code> in {refused.column}
                </>
              )}
            </li>
          ))}
        </ul>
      )}
      {remarks.length > 0 && (
        <ul aria-label="Also found" className="flex flex-col gap-1 border-line border-t px-4 py-3 text-13">
          {remarks.map((remark) => (
            <li key={remark}>{remark}</li>
          ))}
        </ul>
      )}
    </Card>
  );
}
