import { CurveChart, type CurveQuantity } from "@/components/charts/curve-chart";
import { TraceChart, type TraceSegment } from "@/components/charts/trace-chart";
import type { RunTraces } from "@/lib/measure/traces";
import type { Note, RunResult } from "@/lib/measure/types";

/** Digits behind the point by unit; others show two. */
const DECIMALS: Readonly<Record<string, number>> = {
  "m/s": 2,
  "km/h": 1,
  "1/min": 0,
  "%": 0,
  kPa: 1,
  "°C": 1,
  "°": 1,
  m: 1,
  "m/s²": 2,
};

function segmentsOf({ segments }: RunTraces): TraceSegment[] {
  const { pull, coast, sprint } = segments;
  const found: TraceSegment[] = [];
  if (pull) found.push({ kind: "pull", fromS: pull.from_s, toS: pull.to_s });
  if (coast) found.push({ kind: "coast-down", fromS: coast.from_s, toS: coast.to_s });
  if (sprint) found.push({ kind: "sprint", fromS: sprint.from_s, toS: sprint.to_s });
  return found;
}

/** Why a masked stretch was left out: the note that overlaps it. */
function whyMasked(span: { from_s: number; to_s: number }, notes: readonly Note[]): string {
  const note = notes.find(
    ({ from_s, to_s }) =>
      from_s !== undefined && to_s !== undefined && from_s < span.to_s && to_s > span.from_s,
  );
  return note ? note.code.replaceAll("_", " ") : "left out";
}

/** What the logger recorded, thinned for drawing. */
export function RunTraceChart({ traces, notes }: { traces: RunTraces; notes: readonly Note[] }) {
  return (
    <TraceChart
      title="Channels over time"
      timeS={traces.timeS}
      traces={traces.channels.map(({ channel, label, unit, values }) => ({
        id: channel,
        label,
        unit,
        decimals: DECIMALS[unit] ?? 2,
        values,
      }))}
      segments={segmentsOf(traces)}
      masks={traces.masked.map((span) => ({
        fromS: span.from_s,
        toS: span.to_s,
        why: whyMasked(span, notes),
      }))}
      notes={[
        "Time counts from the log's first kept row. Thinned for drawing; the computation used every row.",
      ]}
    />
  );
}

function quantitiesOf(result: RunResult): CurveQuantity[] {
  const { curve, factor } = result;
  if (!curve) return [];
  const reference = factor?.applied ?? false;
  const of = (
    id: string,
    label: string,
    unit: string,
    day: CurveQuantity["values"],
    air: CurveQuantity["values"],
  ) => ({
    id,
    label,
    unit,
    decimals: 1,
    values: reference ? air : day,
    ...(reference && { valuesLabel: "reference air", other: { label: "as on the day", values: day } }),
  });
  return [
    of("power", "Power, crank estimate", "kW", curve.engine_kw, curve.engine_kw_reference),
    of("torque", "Torque, crank estimate", "Nm", curve.engine_nm, curve.engine_nm_reference),
  ];
}

/** Power and torque of this run alone. */
export function RunCurveChart({ result }: { result: RunResult }) {
  const { curve, factor } = result;
  if (!curve) return null;
  return (
    <CurveChart
      title="Power and torque of this run"
      rpm={curve.rpm}
      quantities={quantitiesOf(result)}
      notes={[
        factor?.applied
          ? `Weather factor ${factor.id} applied.`
          : "No weather factor applied: as on the day.",
        "One run alone. A decision rests on the comparison of twins.",
      ]}
    />
  );
}
