import { DescriptionList } from "@/components/ui/data/description-list";
import { numberText } from "@/components/ui/data/number-text";
import { Quantity } from "@/components/ui/data/quantity";
import { type Column, Table } from "@/components/ui/data/table";
import type { RunResult } from "@/lib/measure/types";

/** Stated uncertainties of times are standard ones; ± on this page is about 95 %, twice that (GUM, JCGM 100:2008, 6.3). */
const COVERAGE = 2;

interface TimeRow {
  name: string;
  timeS: number;
  halfWidthS: number | null;
  speedKmh: number | null;
  trapKmh: number | null;
}

const TIME_COLUMNS: Column<TimeRow>[] = [
  { key: "name", header: "Range", rowHeader: true, cell: (row) => row.name },
  {
    key: "time",
    header: "Time",
    numeric: true,
    cell: (row) => (
      <Quantity value={row.timeS} unit="s" halfWidth={row.halfWidthS} decimals={3} orNotStated />
    ),
  },
  {
    key: "speed",
    header: "Speed at its end",
    unit: "km/h, ± not stated",
    numeric: true,
    cell: (row) => numberText(row.speedKmh, { decimals: 1 }),
  },
  {
    key: "trap",
    header: "Trap, last 20.1168 m",
    unit: "km/h, ± not stated",
    numeric: true,
    cell: (row) => numberText(row.trapKmh, { decimals: 1 }),
  },
];

/** Speeds without a unit in their name are km/h. */
const rangeWords = (name: string) =>
  `${name.replace(" ivm", ", clock from 0.3048 m")}${/^\d+-\d+( ivm)?$/.test(name) ? " (km/h)" : ""}`;

function timeRows(result: RunResult): TimeRow[] {
  return Object.entries(result.times_s ?? {}).map(([name, timeS]) => {
    const uncertainty = result.times_uncertainty_s?.[name];
    return {
      name: rangeWords(name),
      timeS,
      halfWidthS: uncertainty === undefined ? null : COVERAGE * uncertainty,
      speedKmh: result.speed_at_kmh?.[name] ?? null,
      trapKmh: result.trap_kmh?.[name] ?? null,
    };
  });
}

/** Times and speeds of the run. */
export function RunTimes({ result }: { result: RunResult }) {
  const rows = timeRows(result);
  if (rows.length === 0)
    return <p className="text-15 text-ink2">The run covers none of the listed ranges.</p>;
  const isShown: Record<string, boolean> = {
    speed: rows.some((row) => row.speedKmh !== null),
    trap: rows.some((row) => row.trapKmh !== null),
  };
  const columns = TIME_COLUMNS.filter((column) => isShown[column.key] ?? true);
  return <Table caption="Times" columns={columns} rows={rows} rowKey={(row) => row.name} dense />;
}

const LOSS_SOURCE = {
  run: "this run's own coast-down",
  twin: "the coast-downs of its twin",
  "road day": "the coast-downs of the road day",
} as const;

/** Peak, factor and losses in words and figures. */
export function RunPeak({ result }: { result: RunResult }) {
  const { peak, factor, loss } = result;
  const factorWords =
    factor && factor.id !== "none" ? `${factor.id} ${numberText(factor.value, { decimals: 4 })}` : "none";
  return (
    <DescriptionList
      items={[
        {
          term: "Peak power, crank estimate, air of the day",
          description: peak ? (
            <>
              <Quantity
                value={peak.engine_kw}
                unit="kW"
                halfWidth={peak.uncertainty_kw}
                decimals={1}
                orNotStated
              />{" "}
              at {numberText(peak.engine_kw_rpm)} per minute
            </>
          ) : (
            "none: it takes a usable pull and a coast-down"
          ),
        },
        {
          term: "Peak torque, crank estimate, air of the day",
          description: peak ? (
            <>
              <Quantity
                value={peak.engine_nm}
                unit="N·m"
                halfWidth={peak.uncertainty_nm}
                decimals={1}
                orNotStated
              />{" "}
              at {numberText(peak.engine_nm_rpm)} per minute
            </>
          ) : (
            "none"
          ),
        },
        {
          term: "Weather factor",
          description: factor ? (
            <>
              <span className="tabular">{factorWords}</span>, {factor.applied ? "applied" : "not applied"}
              {factor.in_range === false && ", outside its permitted range"}. {factor.why}
              {peak && factor.id !== "none" && " The peak above does not carry it."}
            </>
          ) : (
            "none"
          ),
        },
        {
          term: "Road load in neutral",
          description: loss ? (
            <span className="flex flex-col">
              <span className="tabular">
                F0 {numberText(loss.f0_n, { decimals: 1 })} N, F1{" "}
                {numberText(loss.f1_n_per_mps, { decimals: 2 })} N per m/s, F2{" "}
                {numberText(loss.f2_n_per_mps2, { decimals: 4 })} N per (m/s)²
              </span>
              <span>from {LOSS_SOURCE[loss.source]}</span>
            </span>
          ) : (
            "not known: no coast-down of 20 km/h or more"
          ),
        },
        { term: "Speed from", description: result.speed_source ?? "not known" },
        {
          term: "Sample rate",
          description:
            result.sample_rate_hz === null || result.sample_rate_hz === undefined ? (
              "not known"
            ) : (
              <Quantity value={result.sample_rate_hz} unit="Hz" decimals={1} />
            ),
        },
      ]}
    />
  );
}
