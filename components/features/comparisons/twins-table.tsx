import { numberText } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import { Tag } from "@/components/ui/data/tag";
import type { DeltaResult } from "@/lib/measure/types";

/** Out-and-back pairs of both sides and how well their legs agree. */
export function TwinsTable({ delta }: { delta: DeltaResult }) {
  return (
    <Table
      caption="Twins and their closure"
      dense
      scroll="short"
      rows={delta.twins}
      rowKey={(twin) => `${twin.side}-${twin.out}-${twin.back}`}
      empty="No twin: a twin is an out and a back run on one revision."
      columns={[
        {
          key: "side",
          header: "Side",
          cell: (twin) => <Tag tone={twin.side === "B" ? "strong" : "plain"}>{twin.side}</Tag>,
        },
        {
          key: "twin",
          header: "Runs out, back",
          rowHeader: true,
          cell: (twin) => `${twin.out}, ${twin.back}`,
        },
        {
          key: "closure",
          header: "Closes within",
          unit: "%",
          numeric: true,
          cell: (twin) =>
            numberText(twin.closure_pct === null ? null : Math.abs(twin.closure_pct), { decimals: 2 }),
        },
      ]}
    />
  );
}
