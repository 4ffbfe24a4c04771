import type { LogChannel, LogTable } from "@/lib/logs/types";
import type { RandomStream } from "@/lib/signal/random";
import { type RunTrace, STEP_S } from "@/lib/simulate/types";

/** What real loggers do to a recording beyond noise and steps. */
export interface Logger {
  /** Deviation of the time stamps from an even beat, s; the values stay those of the even beat. */
  jitterS: number;
  /** Share of rows that never got written. */
  lostRows: number;
  /** Stretches without any row: how many, of what length in s. */
  pauses: number;
  pauseS: number;
  pedalStepPct: number;
  /** Fresh values a second of engine speed and of the wheels, repeated into the rows between; null: every row. */
  rpmHz: number | null;
  wheelHz: number | null;
  /** A gear column: 0 in neutral. */
  gear: boolean;
}

const HELD = {
  rpmHz: ["engine_speed"],
  wheelHz: ["wheel_speed_undriven", "wheel_speed_driven"],
} as const;

/** A simulated log with the faults of a logger in it. Without any it comes back as it is. */
export function worsenLog(
  log: LogTable,
  trace: RunTrace,
  gear: number,
  logger: Partial<Logger>,
  random: RandomStream,
): LogTable {
  const { timeS } = log;
  let channels = log.channels.map((channel): LogChannel => {
    const name = channel.channel;
    const hz = (["rpmHz", "wheelHz"] as const)
      .filter((kind) => HELD[kind].some((held) => held === name))
      .map((kind) => logger[kind] ?? null)[0];
    if (hz) return { ...channel, values: repeated(timeS, channel.values, hz) };
    const step = logger.pedalStepPct;
    if (name === "pedal" && step)
      return { ...channel, values: channel.values.map((v) => Math.round(v / step) * step) };
    return channel;
  });
  if (logger.gear) {
    const at = (t: number) => trace.engaged[Math.min(trace.length - 1, Math.floor(t / STEP_S))];
    const values = timeS.map((t) => (at(t) === 0 ? 0 : at(t) === 1 ? gear : gear - 1));
    channels = [...channels, { channel: "gear", column: "gear", unitFound: null, unit: "1", values }];
  }
  const pauses = Array.from({ length: logger.pauses ?? 0 }, () => {
    const from = timeS[timeS.length - 1] * random.nextUniform();
    return { fromS: from, toS: from + (logger.pauseS ?? 0.5) };
  });
  const lost = timeS.map((t) =>
    random.nextUniform() < (logger.lostRows ?? 0) || pauses.some((p) => t > p.fromS && t < p.toS) ? 1 : 0,
  );
  const keep = (_: number, i: number) => lost[i] === 0;
  const jitter = logger.jitterS ?? 0;
  const most = 0.45 / log.time.rateHz;
  const times = timeS
    .map((t) => t + (jitter ? Math.max(-most, Math.min(most, jitter * random.nextNormal())) : 0))
    .filter(keep);
  return {
    ...log,
    timeS: times,
    channels: channels.map((channel) => ({ ...channel, values: channel.values.filter(keep) })),
    time: { ...log.time, gaps: pauses },
  };
}

/** Values as they stand at the last beat of a slower source. */
function repeated(timeS: Float64Array, values: Float64Array, hz: number): Float64Array {
  let held = values[0];
  let beat = -1;
  return timeS.map((t, i) => {
    const now = Math.floor(t * hz + 1e-9);
    if (now !== beat) held = values[i];
    beat = now;
    return held;
  });
}
