import { tableStep } from "@/components/charts/frame/table-step";
import { deltaText } from "@/components/charts/overlay/describe-overlay";
import type { DeltaView, OverlayData, OverlayQuantity } from "@/components/charts/overlay/overlay-types";
import { numberText } from "@/components/ui/data/number-text";
import { type Column, Table } from "@/components/ui/data/table";

/** The figures behind the drawing. A fine grid is printed at every second, fifth … point, and the caption says so. */
export function OverlayTable({
  data,
  quantity,
  delta,
}: {
  data: OverlayData;
  quantity: OverlayQuantity;
  delta: DeltaView;
}) {
  const step = tableStep(data.rpm.length);
  const rows = data.rpm.map((rpm, index) => ({ rpm, index })).filter((row) => row.index % step === 0);
  const number = (value: number | null | undefined) => numberText(value, { decimals: quantity.decimals });
  const columns: Column<{ rpm: number; index: number }>[] = [
    {
      key: "rpm",
      header: "Engine speed",
      unit: "1/min",
      numeric: true,
      rowHeader: true,
      cell: (row) => numberText(row.rpm),
    },
    {
      key: "a",
      header: `A ${data.labelA}`,
      unit: quantity.unit,
      numeric: true,
      cell: (row) => number(quantity.a[row.index]),
    },
    {
      key: "b",
      header: `B ${data.labelB}`,
      unit: quantity.unit,
      numeric: true,
      cell: (row) => number(quantity.b[row.index]),
    },
    { key: "d", header: "B \u2212 A", numeric: true, cell: (row) => deltaText(delta, row.index) },
  ];
  const every = step === 1 ? "" : `; one row for every ${step} grid points`;
  return (
    <Table
      caption={`${quantity.label} over engine speed, ${data.nA} runs on A, ${data.nB} runs on B${every}`}
      showCaption
      columns={columns}
      rows={rows}
      rowKey={(row) => String(row.rpm)}
      scroll="short"
      dense
    />
  );
}
