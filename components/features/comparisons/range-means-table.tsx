import { numberText } from "@/components/ui/data/number-text";
import { Quantity } from "@/components/ui/data/quantity";
import { Table } from "@/components/ui/data/table";
import type { RangeMean } from "@/lib/measure/types";

/** Mean difference over ranges of engine speed; losses first, each with its own ± and what could have been shown. */
export function RangeMeansTable({ means, level }: { means: readonly RangeMean[]; level: number }) {
  const rows = [...means].sort(
    (x, y) =>
      Number(isLoss(y)) - Number(isLoss(x)) ||
      y.to_rpm - y.from_rpm - (x.to_rpm - x.from_rpm) ||
      x.from_rpm - y.from_rpm,
  );
  const half = ({ low_pct, high_pct }: RangeMean) =>
    low_pct === null || high_pct === null ? null : (high_pct - low_pct) / 2;
  return (
    <>
      <Table
        caption="Mean difference of torque over ranges of engine speed"
        dense
        rows={rows}
        rowKey={(mean) => `${mean.from_rpm}-${mean.to_rpm}`}
        empty="The sides share no range of engine speed."
        columns={[
          {
            key: "range",
            header: "Range, 1/min",
            rowHeader: true,
            className: "whitespace-nowrap",
            cell: (mean) => `${numberText(mean.from_rpm)}–${numberText(mean.to_rpm)}`,
          },
          {
            key: "d",
            header: "Mean B \u2212 A",
            numeric: true,
            cell: (mean) =>
              half(mean) === null ? (
                <span className="text-ink2">no interval, not claimed</span>
              ) : (
                <Quantity value={mean.pct} halfWidth={half(mean)} unit="%" signed />
              ),
          },
          { key: "says", header: "Says", cell: saysOf },
          {
            key: "least",
            header: "Could have shown",
            numeric: true,
            cell: (mean) =>
              mean.resolvable_pct === null ? "–" : `${numberText(mean.resolvable_pct, { decimals: 2 })} %`,
          },
          { key: "n", header: "n A, B", numeric: true, cell: (mean) => `${mean.n_a}, ${mean.n_b}` },
        ]}
      />
      <p className="px-4 py-3 text-13 text-ink2">
        Each ± is the {numberText(100 * level)} % interval of that one mean; it is no part of the band over
        the whole curve. “Could have shown” is the smallest mean difference that these runs show with 80 %
        chance.
      </p>
    </>
  );
}

const isLoss = (mean: RangeMean) => mean.high_pct !== null && mean.high_pct < 0;

function saysOf(mean: RangeMean): string {
  if (mean.low_pct === null) return "–";
  if (isLoss(mean)) return "loss";
  return mean.low_pct > 0 ? "gain" : "not shown";
}
