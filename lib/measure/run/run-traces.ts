import { heldOnRows } from "@/lib/logs/times/held-on-rows";
import type { KnownChannel, LogTable } from "@/lib/logs/types";
import type { RunTraces, TraceChannel } from "@/lib/measure/run/traces";
import type { RunResult } from "@/lib/measure/types";

/** A trace has at most this many points a channel; each of half as many columns keeps its lowest and highest value. */
const MOST_POINTS = 1200;

const LABELS: Readonly<Partial<Record<KnownChannel, string>>> = {
  wheel_speed_undriven: "Wheel speed, undriven",
  wheel_speed_driven: "Wheel speed, driven",
  gps_speed: "GPS speed",
  engine_speed: "Engine speed",
  pedal: "Pedal",
  throttle: "Throttle",
  manifold_pressure: "Manifold pressure",
  manifold_pressure_gauge: "Manifold pressure, gauge",
  lambda: "Lambda",
  ignition_advance: "Ignition advance",
  knock_retard: "Knock retard",
  intake_temperature: "Intake air temperature",
  coolant_temperature: "Coolant temperature",
  exhaust_temperature: "Exhaust gas temperature",
  gear: "Gear",
  altitude: "Altitude",
  longitudinal_acceleration: "Longitudinal acceleration",
};

/**
 * Thins every channel of a log for drawing: time is cut into columns of equal length, each column keeps a channel's lowest and
 * highest value in the order they came, at two times shared by all channels. Speeds in m/s and the rest in canonical units;
 * positions are left out. A log of no more than 1 200 rows is kept whole. Gaps are null.
 */
export function runTraces(log: LogTable, result: RunResult): RunTraces {
  const table = heldOnRows(log);
  const channels = table.channels.filter(
    (c) => c.channel !== "latitude" && c.channel !== "longitude" && c.channel !== "time",
  );
  const rows = table.timeS.length;
  const traceOf = (values: (number | null)[], k: number): TraceChannel => {
    const { channel, unit, column, name = column } = channels[k];
    return { channel: channel ?? name, label: (channel && LABELS[channel]) ?? name, unit, values };
  };
  const rounded = (value: number) => (Number.isFinite(value) ? Number(value.toPrecision(6)) : null);
  const segments = { ...result.segments };
  if (rows <= MOST_POINTS) {
    return {
      timeS: Array.from(table.timeS, (t) => Number(t.toFixed(4))),
      channels: channels.map((c, k) => traceOf(Array.from(c.values, rounded), k)),
      segments,
    };
  }
  const columns = MOST_POINTS / 2;
  const edges = columnEdges(table.timeS, columns);
  const timeS: number[] = [];
  for (let c = 0; c + 1 < edges.length; c++) {
    const first = table.timeS[edges[c]];
    const last = table.timeS[edges[c + 1] - 1];
    timeS.push(
      Number((first + (last - first) * 0.25).toFixed(4)),
      Number((first + (last - first) * 0.75).toFixed(4)),
    );
  }
  return {
    timeS,
    channels: channels.map((channel, k) => traceOf(extremes(channel.values, edges).map(rounded), k)),
    segments,
  };
}

/** Row numbers at which columns of equal duration begin; columns without rows are left out, the end is the row count. */
function columnEdges(timeS: Float64Array, columns: number): number[] {
  const start = timeS[0];
  const span = timeS[timeS.length - 1] - start;
  const edges: number[] = [];
  let before = -1;
  for (let i = 0; i < timeS.length; i++) {
    const column = Math.min(columns - 1, Math.floor(((timeS[i] - start) / span) * columns));
    if (column !== before) edges.push(i);
    before = column;
  }
  edges.push(timeS.length);
  return edges;
}

/** Lowest and highest value of each column in the order they came; NaN twice where a column has none. */
function extremes(values: Float64Array, edges: readonly number[]): number[] {
  const out: number[] = [];
  for (let c = 0; c + 1 < edges.length; c++) {
    let low = -1;
    let high = -1;
    for (let i = edges[c]; i < edges[c + 1]; i++) {
      if (Number.isNaN(values[i])) continue;
      if (low < 0 || values[i] < values[low]) low = i;
      if (high < 0 || values[i] > values[high]) high = i;
    }
    if (low < 0) out.push(Number.NaN, Number.NaN);
    else out.push(values[Math.min(low, high)], values[Math.max(low, high)]);
  }
  return out;
}
