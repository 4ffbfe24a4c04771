import { decimalsForHalfWidth, numberText } from "@/components/ui/data/number-text";
import { Quantity } from "@/components/ui/data/quantity";
import { type Column, Table } from "@/components/ui/data/table";
import type { LegCounts, TimeDifference } from "@/lib/measure/sprint/time-types";
import type { CampaignResult } from "@/lib/measure/types";

interface Row extends TimeDifference {
  name: string;
}

/** A time's name in words: km/h where no unit is said, which clock, and in what kind of run. */
function rangeWords({ name, kind }: Row): string {
  const range = name.replace(" in a sprint", "").replace(" ivm", "");
  const words = /^[\d.]+-[\d.]+$/.test(range) ? `${range} km/h` : range;
  const clock = name.includes(" ivm") ? ", clock from 0.3048 m" : "";
  return `${words}${clock}${kind ? `, ${kind === "pull" ? "roll-on in a pull" : "sprint"}` : ""}`;
}

/** "3 (2 out, 1 back)"; the count alone in results of older versions. */
function countWords(n: number, legs: LegCounts | undefined): string {
  if (!legs) return String(n);
  const parts = [`${legs.out} out`, `${legs.back} back`];
  if (legs.unknown > 0) parts.push(`${legs.unknown} not stated`);
  return `${n} (${parts.join(", ")})`;
}

const digits = (row: Row) => decimalsForHalfWidth(row.half_width_s, 2);

function columns(labels: { a: string; b: string }): Column<Row>[] {
  const side = (value: number, halfWidth: number | null | undefined, row: Row) => (
    <Quantity value={value} halfWidth={halfWidth ?? null} unit="" decimals={digits(row)} orNotStated />
  );
  return [
    { key: "name", header: "Time", unit: "s", rowHeader: true, className: "min-w-32", cell: rangeWords },
    // The difference first: on a phone it is what stays in sight.
    {
      key: "d",
      header: "B \u2212 A",
      numeric: true,
      cell: (row) =>
        row.half_width_s === null ? (
          <span className="text-ink2">no interval, not claimed</span>
        ) : (
          <Quantity value={row.difference_s} halfWidth={row.half_width_s} unit="s" signed />
        ),
    },
    {
      key: "a",
      header: `A ${labels.a}`,
      numeric: true,
      cell: (row) => side(row.a_s, row.a_half_width_s, row),
    },
    { key: "na", header: "n of A", cell: (row) => countWords(row.n_a, row.legs_a) },
    {
      key: "b",
      header: `B ${labels.b}`,
      numeric: true,
      cell: (row) => side(row.b_s, row.b_half_width_s, row),
    },
    { key: "nb", header: "n of B", cell: (row) => countWords(row.n_b, row.legs_b) },
  ];
}

/** Slower first: losses stand before gains. */
const slowerFirst = (x: Row, y: Row) => Number(y.difference_s > 0) - Number(x.difference_s > 0);

/** Times of both sides, the mean of out and back, with their difference; nothing where no time is on both sides. */
export function TimesTable({ result, labels }: { result: CampaignResult; labels: { a: string; b: string } }) {
  const rows = Object.entries(result.delta?.times_difference ?? {})
    .map(([name, time]): Row => ({ name, ...time }))
    .sort(slowerFirst);
  if (rows.length === 0) return null;
  const level = numberText(100 * (result.delta?.level ?? 0.95));
  return (
    <>
      <Table
        caption="Times of both sides with their difference"
        dense
        rows={rows}
        rowKey={(row) => row.name}
        columns={columns(labels)}
      />
      <p className="px-4 py-3 text-13 text-ink2">
        A side’s time is the mean of its out and back legs, which takes out most of slope and steady wind; its
        ± holds the scatter of the runs and what the instruments leave open. B − A is positive where B is
        slower; its ± is its own {level} % interval. Roll-ons in pulls and times of sprints are never mixed.
      </p>
    </>
  );
}
