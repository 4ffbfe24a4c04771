import { CurveChart, type CurveQuantity } from "@/components/charts/curve-chart";
import { TraceChart, type TraceMask, type TraceSegment } from "@/components/charts/trace-chart";
import { TRACES_ANCHOR } from "@/components/features/runs/traces-anchor";
import { Disclosure } from "@/components/ui/layout/disclosure";
import { consequenceOf } from "@/lib/measure/judge/consequence";
import type { RunTraces } from "@/lib/measure/run/traces";
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

/** The spans of the findings, those that are left out and those only warned of. */
function masksOf(notes: readonly Note[]): TraceMask[] {
  return notes.flatMap((note): TraceMask[] => {
    const { code, from_s, to_s } = note;
    if (from_s === undefined || to_s === undefined) return [];
    const kind = consequenceOf(note) === "masked" ? "masked" : "noted";
    return [{ fromS: from_s, toS: to_s, why: code.replaceAll("_", " "), kind }];
  });
}

/** What one looks at first; a log often holds a speed or a pedal several times over. */
const FIRST_LOOK: readonly (readonly string[])[] = [
  ["wheel_speed_undriven", "gps_speed", "wheel_speed_driven"],
  ["engine_speed"],
  ["pedal", "throttle"],
  ["manifold_pressure", "manifold_pressure_gauge"],
  ["lambda"],
  ["ignition_advance"],
  ["knock_retard"],
  ["exhaust_temperature"],
];

type Channels = RunTraces["channels"];

/** The first of each choice that the log holds, and all the others. */
function splitChannels(channels: Channels): { first: Channels; others: Channels } {
  const first = FIRST_LOOK.flatMap((names) => {
    const name = names.find((candidate) => channels.some(({ channel }) => channel === candidate));
    return channels.filter(({ channel }) => channel === name);
  });
  return { first, others: channels.filter((channel) => !first.includes(channel)) };
}

function TraceStack({
  title,
  traces,
  channels,
  notes,
  anchor,
}: {
  title: string;
  anchor?: string;
  traces: RunTraces;
  channels: Channels;
  notes: readonly Note[];
}) {
  return (
    <TraceChart
      title={title}
      timeS={traces.timeS}
      traces={channels.map(({ channel, label, unit, values }) => ({
        id: channel,
        label,
        unit,
        decimals: DECIMALS[unit] ?? 2,
        values,
      }))}
      segments={segmentsOf(traces)}
      masks={masksOf(notes)}
      anchor={anchor}
      notes={[
        "Time counts from the log's first kept row. Thinned for drawing; the computation used every row.",
        "Hatched through: left out of the figures. Hatched strip on top: warned of. The verdict says why.",
      ]}
    />
  );
}

/** What the logger recorded, thinned for drawing: the telling channels first, the others on demand. */
export function RunTraceChart({ traces, notes }: { traces: RunTraces; notes: readonly Note[] }) {
  const { first, others } = splitChannels(traces.channels);
  const shown = first.length > 0 ? first : others;
  return (
    <div className="flex flex-col gap-2">
      <TraceStack
        title="Channels over time"
        traces={traces}
        channels={shown}
        notes={notes}
        anchor={TRACES_ANCHOR}
      />
      {first.length > 0 && others.length > 0 && (
        <Disclosure summary="The other channels of the log" aside={`${others.length}`}>
          <TraceStack title="Other channels" traces={traces} channels={others} notes={notes} />
        </Disclosure>
      )}
    </div>
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
