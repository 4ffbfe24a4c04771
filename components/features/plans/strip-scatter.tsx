import type { Route } from "next";
import Link from "next/link";
import { HistoryChart, type HistoryQuantity } from "@/components/charts/history-chart";
import { numberText } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import { Tag } from "@/components/ui/data/tag";
import { Card } from "@/components/ui/layout/card";
import { StateMark } from "@/components/ui/status/state-mark";
import { repeatabilityLimit } from "@/lib/compare/band/two-means";
import { type Scatter, scatterInterval } from "@/lib/compare/plan/plan-scatter";
import type { ScatterDay, StripScatter } from "@/lib/services/plans/schema";

const pct = (value: number | null | undefined) => numberText(value, { decimals: 2 });

/** A standard deviation with its interval and degrees of freedom, e.g. "0.45 (0.32 to 0.74), df 12". */
function sdText(scatter: Scatter | null): string {
  const interval = scatter && scatterInterval(scatter);
  if (!scatter || !interval) return "–";
  return `${pct(scatter.sdPct)} (${pct(interval.lowPct)} to ${pct(interval.highPct)}), df ${scatter.df}`;
}

const scatterOf = ({ figures }: ScatterDay, key: "sd_point_pct" | "sd_range_pct"): Scatter | null => {
  const sdPct = figures?.[key] ?? null;
  return sdPct === null || !figures ? null : { sdPct, df: figures.df };
};

function limitOf(day: ScatterDay): number | null {
  const scatter = scatterOf(day, "sd_point_pct");
  return scatter && repeatabilityLimit(scatter.sdPct, scatter.df);
}

function Outcome({ day }: { day: ScatterDay }) {
  if (!day.isNullTest) return <span className="text-ink2">no null test</span>;
  const verdict = day.nullTest?.verdict;
  if (!verdict) return <StateMark state="stale">null test, not computed yet</StateMark>;
  const state = {
    "claims nothing": "met",
    "claims something": "not_met",
    "too little": "too_little",
  } as const;
  return <StateMark state={state[verdict]}>{`null test: ${verdict}`}</StateMark>;
}

function quantities(days: readonly ScatterDay[]): HistoryQuantity[] {
  const intervals = days.map((day) => {
    const scatter = scatterOf(day, "sd_point_pct");
    return scatter && scatterInterval(scatter);
  });
  return [
    {
      id: "sd",
      label: "Scatter between runs (sd)",
      unit: "%",
      decimals: 2,
      values: days.map((day) => scatterOf(day, "sd_point_pct")?.sdPct ?? null),
      low: intervals.map((interval) => interval?.lowPct ?? null),
      high: intervals.map((interval) => interval?.highPct ?? null),
    },
    {
      id: "closure",
      label: "Closure of the twins (rms)",
      unit: "%",
      decimals: 2,
      values: days.map((day) => day.figures?.closure.rms_pct ?? null),
    },
  ];
}

/** One strip: its scatter over the road days as a chart and as a table, always with n and degrees of freedom. */
export function StripScatterCard({ strip }: { strip: StripScatter }) {
  const known = strip.days.filter((day) => day.figures !== null);
  return (
    <Card
      title={strip.stripName}
      description={`Pooled over its road days, standard deviation between runs with its 95 % interval: ${sdText(strip.point)} at one engine speed, ${sdText(strip.range)} over a range of 1,000 per minute (%).`}
      flush
    >
      {known.length > 1 && (
        <div className="px-4 md:px-5">
          <HistoryChart
            title="Over the road days"
            occasions={known.map((day) => day.day)}
            occasionName="road day"
            quantities={quantities(known)}
            notes={["The shaded band is the 95 % interval of the standard deviation itself (chi-square)."]}
          />
        </div>
      )}
      <Table
        caption={`Scatter of ${strip.stripName}, by road day`}
        dense
        rows={strip.days}
        rowKey={(day) => day.roadDayId}
        columns={[
          {
            key: "day",
            header: "Road day",
            rowHeader: true,
            cell: (day) => (
              <span className="whitespace-nowrap">
                <Link href={`/road-days/${day.roadDayId}` as Route} className="link tabular">
                  {day.day}
                </Link>{" "}
                {day.sample && <Tag>sample</Tag>}
              </span>
            ),
          },
          {
            key: "n",
            header: "n runs, df",
            numeric: true,
            cell: (day) => (day.figures ? `${day.figures.runs}, ${day.figures.df}` : "–"),
          },
          {
            key: "point",
            header: "sd, one speed",
            unit: "%",
            numeric: true,
            cell: (day) => pct(day.figures?.sd_point_pct),
          },
          {
            key: "range",
            header: "sd, range",
            unit: "%",
            numeric: true,
            cell: (day) => pct(day.figures?.sd_range_pct),
          },
          { key: "r", header: "r, two pulls", unit: "%", numeric: true, cell: (day) => pct(limitOf(day)) },
          {
            key: "closure",
            header: "Closure, rms and largest",
            unit: "%",
            numeric: true,
            cell: ({ figures }) =>
              figures
                ? `${pct(figures.closure.rms_pct)}, ${pct(figures.closure.largest_pct)} (n ${figures.closure.twins})`
                : "–",
          },
          { key: "test", header: "Null test", cell: (day) => <Outcome day={day} /> },
          {
            key: "from",
            header: "From",
            cell: ({ comparison }) =>
              comparison ? (
                <Link href={`/comparisons/${comparison.id}` as Route} className="link whitespace-nowrap">
                  {comparison.a === comparison.b ? `R${comparison.a}` : `R${comparison.a}, R${comparison.b}`},{" "}
                  {comparison.analysisVersion}
                </Link>
              ) : (
                <span className="text-ink2">no result yet</span>
              ),
          },
        ]}
      />
    </Card>
  );
}
