import { tableStep } from "@/components/charts/frame/table-step";
import type { StackData } from "@/components/charts/stack/stack-types";
import { numberText } from "@/components/ui/data/number-text";
import { type Column, Table } from "@/components/ui/data/table";

/** The figures behind the panels, at every n-th point where there are many; the caption says so. */
export function StackTable({ data, caption }: { data: StackData; caption: string }) {
  const step = tableStep(data.x.length);
  const rows = data.x.map((x, index) => ({ x, index })).filter((row) => row.index % step === 0);
  const columns: Column<{ x: number; index: number }>[] = [
    {
      key: "x",
      header: data.axis.title,
      numeric: true,
      rowHeader: true,
      cell: (row) => numberText(row.x, { decimals: data.axis.decimals }),
    },
    ...data.panels.flatMap((panel) =>
      panel.lines.map((line) => ({
        key: `${panel.id}${line.kind}${line.label ?? ""}`,
        header: panel.lines.length > 1 ? `${panel.label} ${line.label ?? ""}` : panel.label,
        unit: panel.unit,
        numeric: true,
        cell: (row: { index: number }) => numberText(line.values[row.index], { decimals: panel.decimals }),
      })),
    ),
  ];
  return (
    <Table
      caption={step === 1 ? caption : `${caption}; one row for every ${step} points`}
      showCaption
      columns={columns}
      rows={rows}
      rowKey={(row) => String(row.index)}
      scroll="short"
      dense
    />
  );
}
