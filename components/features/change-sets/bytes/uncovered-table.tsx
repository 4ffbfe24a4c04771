import { FirstListed } from "@/components/features/change-sets/list/first-listed";
import { addressText } from "@/components/ui/data/address-text";
import { numberText } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import type { UncoveredRange } from "@/lib/calibration/changes/types";

const KIND_WORDS: Record<UncoveredRange["kind"], string | null> = {
  differs: null,
  "only a": "only before",
  "only b": "only after",
};

export interface UncoveredTableProps {
  ranges: readonly UncoveredRange[];
  /** How many there are, if more than are listed. */
  total: number;
  hasDescription: boolean;
}

/** Changed bytes that no characteristic covers, with the bytes around them. */
export function UncoveredTable({ ranges, total, hasDescription }: UncoveredTableProps) {
  return (
    <div className="flex flex-col gap-2">
      <Table
        caption={hasDescription ? "Changed bytes outside the description" : "Changed bytes"}
        dense
        scroll="tall"
        rows={ranges}
        rowKey={(range) => `${range.kind}${range.address}`}
        columns={[
          {
            key: "address",
            header: "Address",
            rowHeader: true,
            className: "tabular whitespace-nowrap",
            cell: (range) => addressText(range.address),
          },
          {
            key: "length",
            header: "Length",
            unit: "bytes",
            numeric: true,
            cell: (range) => numberText(range.length),
          },
          {
            key: "segment",
            header: "Memory segment",
            cell: (range) =>
              range.segment
                ? `${range.segment}${range.programType ? `, ${range.programType}` : ""}`
                : "none named",
          },
          {
            key: "bytes",
            header: "Before, after",
            className: "min-w-96",
            cell: (range) => <HexPair range={range} />,
          },
        ]}
      />
      <FirstListed listed={ranges.length} count={total} things="places" />
    </div>
  );
}

/** Both sides under each other; the bytes of the range heavy, those around it for orientation. */
function HexPair({ range }: { range: UncoveredRange }) {
  const kind = KIND_WORDS[range.kind];
  return (
    <div className="tabular text-13">
      {kind && <p className="font-sans">{kind}</p>}
      <HexLine side="before" hex={range.before} range={range} />
      <HexLine side="after" hex={range.after} range={range} />
    </div>
  );
}

function HexLine({
  side,
  hex,
  range,
}: {
  side: "before" | "after";
  hex: string | null;
  range: UncoveredRange;
}) {
  const bytes = hex?.match(/../g) ?? [];
  const first = range.address - range.contextAddress;
  const end = first + range.length;
  const part = (from: number, to?: number) => bytes.slice(from, to).join(" ").toUpperCase();
  return (
    <p className="whitespace-nowrap">
      <span className="inline-block w-14 font-sans text-ink2">{side}</span>
      {hex === null ? (
        <span className="text-ink2">no byte here</span>
      ) : (
        <>
          <span className="text-ink2">{part(0, first)}</span>{" "}
          <strong className="underline underline-offset-4">{part(first, end)}</strong>{" "}
          <span className="text-ink2">{part(end)}</span>
        </>
      )}
    </p>
  );
}
