import { heldOnRows } from "@/lib/logs/times/held-on-rows";
import type { KnownChannel, LogTable } from "@/lib/logs/types";
import { type SensorFault, sensorFaults, withoutFaults } from "@/lib/measure/judge/sensor-faults";
import { findOutliers } from "@/lib/signal/outliers";
import { median } from "@/lib/signal/statistics";

/** Samples of one channel with its own times: gaps left out, and held repeats of a slower source left out. */
export interface SampledChannel {
  times: Float64Array;
  values: Float64Array;
  /** Fresh samples a second. */
  rateHz: number;
}

/** The channels of one log that the computation uses, in canonical units. Row arrays have one value a row (NaN = missing). */
export interface RunSignals {
  timeS: Float64Array;
  rateHz: number;
  undriven: SampledChannel | null;
  driven: SampledChannel | null;
  gps: SampledChannel | null;
  engineSpeed: SampledChannel | null;
  acceleration: SampledChannel | null;
  altitude: SampledChannel | null;
  latitude: SampledChannel | null;
  longitude: SampledChannel | null;
  /** Pedal, else throttle, in percent. */
  loadRows: Float64Array | null;
  engineRows: Float64Array | null;
  gearRows: Float64Array | null;
  /** Best road speed there is, gaps bridged linearly: for finding segments only. */
  speedRows: Float64Array;
  speedName: "undriven wheel" | "gps" | "driven wheel";
  /** What was left out of the channels above because the sensor did not tell it. */
  faults: SensorFault[];
}

const SLOW_SOURCES: ReadonlySet<KnownChannel> = new Set(["gps_speed", "altitude", "latitude", "longitude"]);

/** A jump of one sample is a reading error from 2 % and this much on [common practice, no source]. */
const LEAST_JUMP_MPS = 0.3;
const LEAST_JUMP_RPM = 60;
const JUMP_SHARE = 0.02;

/** Leaves out single samples that jump away from their neighbours, and notes each in `faults`. */
function withoutJumps(
  channel: SampledChannel | null,
  least: number,
  name: KnownChannel,
  faults: SensorFault[],
): SampledChannel | null {
  if (!channel) return null;
  const changes = channel.values.subarray(1).map((v, i) => Math.abs(v - channel.values[i]) || Number.NaN);
  // A coarse channel moves by its step at once.
  const floor = Math.max(least, 1.5 * (median(changes) || 0));
  const outlier = findOutliers(channel.values, 4, (value) => floor + JUMP_SHARE * value);
  if (!outlier.includes(1)) return channel;
  outlier.forEach((is, i) => {
    const at = channel.times[i];
    if (is) faults.push({ channel: name, kind: "jump", from_s: at, to_s: at, samples: 1 });
  });
  const keep = (_: number, i: number) => outlier[i] === 0;
  return { ...channel, times: channel.times.filter(keep), values: channel.values.filter(keep) };
}

/** Picks and cleans the channels of a log. The log must carry a road speed (see `requireRoadSpeed`). */
export function runSignals(log: LogTable): RunSignals {
  const table = heldOnRows(log);
  const faults = sensorFaults(table);
  const sound = (from: LogTable, name: KnownChannel) => {
    const channel = from.channels.find((c) => c.channel === name);
    if (!channel) return null;
    const own = faults.filter((fault) => fault.channel === name && fault.kind !== "jump");
    const timeS = channel.timeS ?? from.timeS;
    return { timeS, values: withoutFaults(timeS, channel.values, own) };
  };
  const rows = (name: KnownChannel) => sound(table, name)?.values ?? null;
  const sampled = (name: KnownChannel) => {
    const channel = sound(log, name);
    return channel && sampledChannel(channel.timeS, channel.values, SLOW_SOURCES.has(name));
  };
  const clean = (name: KnownChannel, least: number) => withoutJumps(sampled(name), least, name, faults);
  const moving = (channel: SampledChannel | null) => (channel?.values.some((v) => v > 1) ? channel : null);
  const undriven = moving(clean("wheel_speed_undriven", LEAST_JUMP_MPS));
  const gps = moving(clean("gps_speed", LEAST_JUMP_MPS));
  const driven = moving(clean("wheel_speed_driven", LEAST_JUMP_MPS));
  const best = undriven ?? gps ?? driven;
  const steps = table.timeS.subarray(1).map((t, i) => t - table.timeS[i]);
  const pedal = rows("pedal");
  const throttle = rows("throttle");
  const enough = (values: Float64Array | null) =>
    values && values.filter(Number.isFinite).length > values.length / 2 ? values : null;
  return {
    timeS: table.timeS,
    rateHz: 1 / median(steps),
    undriven,
    driven,
    gps,
    engineSpeed: clean("engine_speed", LEAST_JUMP_RPM),
    acceleration: sampled("longitudinal_acceleration"),
    altitude: sampled("altitude"),
    latitude: sampled("latitude"),
    longitude: sampled("longitude"),
    loadRows: enough(pedal) ?? enough(throttle),
    engineRows: rows("engine_speed"),
    gearRows: rows("gear"),
    speedRows: best ? bridged(table.timeS, best) : new Float64Array(table.timeS.length),
    speedName: undriven ? "undriven wheel" : gps ? "gps" : "driven wheel",
    faults,
  };
}

/**
 * The fresh samples of a column: a slower source is repeated row by row until its next value. Holding shows as changes at a
 * steady period of two rows or more; a coarse step shows the same when the value moves evenly, but then most changes have one
 * size, and the column is kept whole. `slowSource` says that holding is usual (GPS), so the sizes are not asked.
 */
export function sampledChannel(
  timeS: Float64Array,
  values: Float64Array,
  slowSource = false,
): SampledChannel | null {
  const present: number[] = [];
  for (let i = 0; i < values.length; i++) if (!Number.isNaN(values[i])) present.push(i);
  if (present.length < 2) return null;
  const changes: number[] = [present[0]];
  const jumps: number[] = [];
  for (let k = 1; k < present.length; k++) {
    const jump = Math.abs(values[present[k]] - values[present[k - 1]]);
    if (jump === 0) continue;
    changes.push(present[k]);
    jumps.push(jump);
  }
  const keep = isHeld(changes, jumps, slowSource) ? changes : present;
  const times = Float64Array.from(keep, (i) => timeS[i]);
  const span = times[times.length - 1] - times[0];
  return {
    times,
    values: Float64Array.from(keep, (i) => values[i]),
    rateHz: span > 0 ? (times.length - 1) / span : 0,
  };
}

function isHeld(changes: readonly number[], jumps: readonly number[], slowSource: boolean): boolean {
  if (changes.length < 10) return false;
  const gaps = changes.slice(1).map((row, k) => row - changes[k]);
  const period = median(gaps);
  if (period < 1.5) return false;
  const steady = gaps.filter(
    (gap) => Math.abs(gap - period * Math.max(1, Math.round(gap / period))) <= 1,
  ).length;
  if (steady < 0.8 * gaps.length) return false;
  if (slowSource) return true;
  const smallest = jumps.reduce((low, jump) => Math.min(low, jump), Number.POSITIVE_INFINITY);
  const oneSize = jumps.filter((jump) => jump < 1.5 * smallest).length;
  return oneSize < 0.4 * jumps.length;
}

function bridged(timeS: Float64Array, channel: SampledChannel): Float64Array {
  const { times, values } = channel;
  let k = 0;
  return timeS.map((t) => {
    while (k < times.length - 2 && times[k + 1] < t) k++;
    const u = Math.min(1, Math.max(0, (t - times[k]) / (times[k + 1] - times[k])));
    return values[k] + u * (values[k + 1] - values[k]);
  });
}
