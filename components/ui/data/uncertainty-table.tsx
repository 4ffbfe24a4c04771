import { decimalsForHalfWidth, numberText } from "@/components/ui/data/number-text";
import { type Column, Table } from "@/components/ui/data/table";

/** One independent part of an uncertainty, with a sentence on where it comes from. */
export interface UncertaintyPart {
  name: string;
  pct: number;
  value: number;
  basis: string;
}

export interface UncertaintyTableProps {
  caption: string;
  parts: readonly UncertaintyPart[];
  unit: string;
  /** Half-width of the whole: `factor` times the root of the sum of squares. */
  total: { factor: number; pct: number; value: number };
}

interface Row extends UncertaintyPart {
  share: number | null;
}

/** A bar as long as the part is next to the largest; drawn, since style attributes are not allowed. */
function Bar({ share }: { share: number }) {
  return (
    <svg aria-hidden="true" viewBox="0 0 100 8" preserveAspectRatio="none" className="h-2 w-full min-w-12">
      <rect width="100" height="8" className="fill-sunk" />
      <rect width={Math.max(0.5, 100 * share)} height="8" className="fill-ink2" />
    </svg>
  );
}

/** What an uncertainty is made of, the largest part first, and what it comes to. */
export function UncertaintyTable({ caption, parts, unit, total }: UncertaintyTableProps) {
  const sorted = [...parts].sort((a, b) => b.pct - a.pct);
  const most = sorted[0]?.pct ?? 0;
  const rows: Row[] = [
    ...sorted.map((part) => ({ ...part, share: most > 0 ? part.pct / most : 0 })),
    {
      name: `Together, times ${numberText(total.factor)}: ±`,
      pct: total.pct,
      value: total.value,
      share: null,
      basis: "Root of the sum of squares, then times the coverage factor: about 95 %.",
    },
  ];
  const digits = decimalsForHalfWidth(total.value, 1) + 2;
  const columns: Column<Row>[] = [
    {
      key: "part",
      header: "Part",
      rowHeader: true,
      className: "min-w-44",
      cell: (row) => (
        <span className="flex flex-col">
          <span>{row.name}</span>
          <span className="font-normal text-13 text-ink2">{row.basis}</span>
        </span>
      ),
    },
    {
      key: "pct",
      header: "Standard",
      unit: "%",
      numeric: true,
      cell: (row) => <Figure value={row.pct} decimals={2} whole={row.share === null} />,
    },
    {
      key: "value",
      header: "Standard",
      unit,
      numeric: true,
      cell: (row) => <Figure value={row.value} decimals={digits} whole={row.share === null} />,
    },
    // Last: on a phone the figures are what stays in sight.
    {
      key: "bar",
      header: "Share",
      className: "w-1/5",
      cell: (row) => row.share !== null && <Bar share={row.share} />,
    },
  ];
  return <Table caption={caption} dense columns={columns} rows={rows} rowKey={(row) => row.name} />;
}

function Figure({ value, decimals, whole }: { value: number; decimals: number; whole: boolean }) {
  const text = numberText(value, { decimals });
  return whole ? <strong>± {text}</strong> : text;
}
