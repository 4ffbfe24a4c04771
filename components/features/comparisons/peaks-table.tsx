import { TimesTable } from "@/components/features/comparisons/times-table";
import { decimalsForHalfWidth, numberText } from "@/components/ui/data/number-text";
import { Quantity } from "@/components/ui/data/quantity";
import { Table } from "@/components/ui/data/table";
import type { CampaignResult } from "@/lib/measure/types";

interface Line {
  what: string;
  unit: string;
  a: number | null;
  b: number | null;
  /** ± of each side's own value, where the result states one. */
  own: [number | null, number | null];
  at: [number, number] | null;
  difference: number | null;
  halfWidth: number | null;
  n: [number, number];
}

function lines(result: CampaignResult): Line[] {
  const { A, B } = result.sides;
  const n: [number, number] = [A?.n ?? 0, B?.n ?? 0];
  const peaks = result.delta?.peak_difference ?? null;
  const pair = (a: number | undefined, b: number | undefined): Line["at"] =>
    a === undefined || b === undefined ? null : [a, b];
  const power: Line = {
    what: "Peak power",
    unit: "kW",
    a: A?.peak?.engine_kw ?? null,
    b: B?.peak?.engine_kw ?? null,
    own: [A?.peak?.uncertainty_kw ?? null, B?.peak?.uncertainty_kw ?? null],
    at: pair(A?.peak?.engine_kw_rpm, B?.peak?.engine_kw_rpm),
    difference: peaks?.engine_kw ?? null,
    halfWidth: peaks?.half_width_kw ?? null,
    n,
  };
  const torque: Line = {
    what: "Peak torque",
    unit: "N·m",
    a: A?.peak?.engine_nm ?? null,
    b: B?.peak?.engine_nm ?? null,
    own: [A?.peak?.uncertainty_nm ?? null, B?.peak?.uncertainty_nm ?? null],
    at: pair(A?.peak?.engine_nm_rpm, B?.peak?.engine_nm_rpm),
    difference: peaks?.engine_nm ?? null,
    halfWidth: peaks?.half_width_nm ?? null,
    n,
  };
  return [power, torque];
}

/** The air that both sides' peaks are referred to, in words. */
function basisWords({ sides, runs }: CampaignResult): string {
  if ((sides.A ?? sides.B)?.basis !== "reference") return "air of the day";
  const ids = runs.flatMap((run) => (run.usable && run.factor?.applied ? [run.factor.id] : []));
  return `reference air by ${[...new Set(ids)].join(", ") || "a factor that is not named"}`;
}

/** Peaks and times of both sides; a difference always with its ± and its n, or it is not claimed. */
export function PeaksTable({ result, labels }: { result: CampaignResult; labels: { a: string; b: string } }) {
  const digits = (line: Line) => decimalsForHalfWidth(line.halfWidth, 1);
  const side = (line: Line, which: 0 | 1) => (
    <>
      <Quantity
        value={which === 0 ? line.a : line.b}
        unit=""
        halfWidth={line.own[which]}
        decimals={digits(line)}
        orNotStated
      />
      {line.at && <span className="text-13 text-ink2"> at {numberText(line.at[which])}</span>}
    </>
  );
  return (
    <>
      <Table
        caption={`Peaks (crank estimate, ${basisWords(result)}) of both sides with their difference`}
        dense
        rows={lines(result)}
        rowKey={(line) => line.what}
        columns={[
          {
            key: "what",
            header: "Quantity",
            rowHeader: true,
            className: "min-w-32",
            cell: (line) => `${line.what}, ${line.unit}`,
          },
          // The difference first: on a phone it is what stays in sight.
          {
            key: "d",
            header: "B \u2212 A",
            numeric: true,
            cell: (line) =>
              line.halfWidth === null ? (
                <span className="text-ink2">no interval, not claimed</span>
              ) : (
                <Quantity value={line.difference} halfWidth={line.halfWidth} unit={line.unit} signed />
              ),
          },
          { key: "n", header: "n A, B", numeric: true, cell: (line) => `${line.n[0]}, ${line.n[1]}` },
          { key: "a", header: `A ${labels.a}`, numeric: true, cell: (line) => side(line, 0) },
          { key: "b", header: `B ${labels.b}`, numeric: true, cell: (line) => side(line, 1) },
        ]}
      />
      <p className="px-4 py-3 text-13 text-ink2">
        Peaks are crank estimates in {basisWords(result)}. The ± beside A or B is that of the side’s own peak,
        about 95 %; what it is made of is listed further down. B − A of the peaks comes from the model with
        leg and order taken out and so need not equal the plain difference.
      </p>
      <TimesTable result={result} labels={labels} />
    </>
  );
}
