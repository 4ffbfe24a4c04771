import { decimalsForHalfWidth, numberText } from "@/components/ui/data/number-text";
import { Quantity } from "@/components/ui/data/quantity";
import { type Column, Table } from "@/components/ui/data/table";
import type { FallSource } from "@/lib/measure/sprint/time-types";
import type { RunResult } from "@/lib/measure/types";

/** Stated uncertainties of times are standard ones; ± on this page is about 95 %, twice that (GUM, JCGM 100:2008, 6.3). */
const COVERAGE = 2;
const ROLLOUT = " ivm";

/** A value with its half-width; either may be missing. */
interface Stated {
  value: number | null;
  halfWidth: number | null;
}

interface TimeRow {
  name: string;
  time: Stated;
  /** The same with the clock started at 0.3048 m. */
  rollout: Stated;
  fall: Stated;
  speed: Stated;
  trap: Stated;
}

type Values = Record<string, number> | undefined;

const stated = (values: Values, uncertainties: Values, name: string): Stated => {
  const uncertainty = uncertainties?.[name];
  return {
    value: values?.[name] ?? null,
    halfWidth: uncertainty === undefined ? null : COVERAGE * uncertainty,
  };
};

/** Speeds without a unit in their name are km/h. */
const rangeWords = (name: string) => `${name}${/^[\d.]+-[\d.]+$/.test(name) ? " km/h" : ""}`;

/** A time with the clock from 0.3048 m stands beside its own from rest. */
function timeRow(result: RunResult, name: string): TimeRow {
  const { times_s, times_uncertainty_s, fall_effect_s, fall_effect_uncertainty_s } = result;
  return {
    name: rangeWords(name),
    time: stated(times_s, times_uncertainty_s, name),
    rollout: stated(times_s, times_uncertainty_s, name + ROLLOUT),
    fall: stated(fall_effect_s, fall_effect_uncertainty_s, name),
    speed: stated(result.speed_at_kmh, result.speed_uncertainty_kmh, name),
    trap: stated(result.trap_kmh, result.trap_uncertainty_kmh, name),
  };
}

const figure = ({ value, halfWidth }: Stated, unit: string, decimals: number, signed = false) =>
  value === null ? (
    "–"
  ) : (
    <Quantity
      value={value}
      unit={unit}
      halfWidth={halfWidth}
      decimals={halfWidth === null ? decimals : Math.min(3, decimalsForHalfWidth(halfWidth, decimals))}
      signed={signed}
      orNotStated
    />
  );

function columnsFor(rows: readonly TimeRow[], fromRest: boolean): Column<TimeRow>[] {
  const columns: (Column<TimeRow> & { of?: (row: TimeRow) => Stated })[] = [
    {
      key: "name",
      header: "Range",
      rowHeader: true,
      className: "whitespace-nowrap",
      cell: (row) => row.name,
    },
    {
      key: "time",
      header: fromRest ? "From rest" : "Time",
      numeric: true,
      cell: (row) => figure(row.time, "s", 3),
    },
    {
      key: "rollout",
      header: "From 0.3048 m",
      numeric: true,
      of: (row) => row.rollout,
      cell: (row) => figure(row.rollout, "s", 3),
    },
    {
      key: "fall",
      header: "Of it by the fall",
      numeric: true,
      of: (row) => row.fall,
      cell: (row) => figure(row.fall, "s", 3, true),
    },
    {
      key: "speed",
      header: "Speed there, instantaneous",
      numeric: true,
      of: (row) => row.speed,
      cell: (row) => figure(row.speed, "km/h", 1),
    },
    {
      key: "trap",
      header: "Trap speed, mean of the last 20.1168 m",
      numeric: true,
      of: (row) => row.trap,
      cell: (row) => figure(row.trap, "km/h", 1),
    },
  ];
  return columns.filter(({ of }) => !of || rows.some((row) => of(row).value !== null));
}

const FALL_SOURCE: Record<FallSource, string> = {
  altitude: "this run’s altitude",
  "pooled altitude": "the altitude of the road day’s runs",
  "road day": "the slope that the road day’s coast-downs tell",
};

/** The net fall of the run with its ±, in words. */
function fallWords({
  net_fall_pct: pct,
  net_fall_uncertainty_pct: u,
  net_fall_from: from,
}: RunResult): string {
  if (pct === null || pct === undefined) return "Net fall of the road: not known, since no altitude tells.";
  const size = numberText(Math.abs(pct), { decimals: 2 });
  const stated =
    u === null || u === undefined
      ? `${size} % (± not stated)`
      : `${size} ± ${numberText(COVERAGE * u, { decimals: 2 })} %`;
  return `Net fall of the road: ${stated} ${pct >= 0 ? "downhill" : "uphill"}, by ${from ? FALL_SOURCE[from] : "an unnamed source"}. What the fall adds is in the time and not taken out; the mean of out and back is the result.`;
}

/** Times and speeds of the run: from rest on both clocks, and between two speeds. */
export function RunTimes({ result }: { result: RunResult }) {
  const names = Object.keys(result.times_s ?? {}).filter((name) => !name.endsWith(ROLLOUT));
  if (names.length === 0)
    return <p className="text-15 text-ink2">The run covers none of the listed ranges.</p>;
  const isFromRest = (name: string) => /^0-| m$/.test(name);
  const groups = [
    { caption: "Times from rest", rows: names.filter(isFromRest), fromRest: true },
    { caption: "Times between two speeds", rows: names.filter((name) => !isFromRest(name)), fromRest: false },
  ].map((group) => ({ ...group, rows: group.rows.map((name) => timeRow(result, name)) }));
  return (
    <div className="flex flex-col gap-4">
      {groups.map(({ caption, rows, fromRest }) =>
        rows.length === 0 ? null : (
          <Table
            key={caption}
            caption={caption}
            showCaption
            columns={columnsFor(rows, fromRest)}
            rows={rows}
            rowKey={(row) => row.name}
            dense
          />
        ),
      )}
      {result.net_fall_pct !== undefined && <p className="text-13 text-ink2">{fallWords(result)}</p>}
    </div>
  );
}
