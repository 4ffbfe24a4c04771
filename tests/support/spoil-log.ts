import type { KnownChannel, LogTable } from "@/lib/logs/types";

/** A log with one channel's values changed by their time; the others stay. */
export function changed(
  log: LogTable,
  channel: KnownChannel,
  value: (v: number, t: number, i: number) => number,
): LogTable {
  return {
    ...log,
    channels: log.channels.map((c) =>
      c.channel === channel ? { ...c, values: c.values.map((v, i) => value(v, log.timeS[i], i)) } : c,
    ),
  };
}

/** A log in which a channel stands still between two times. */
export function frozen(log: LogTable, channel: KnownChannel, fromS: number, toS: number): LogTable {
  const values = log.channels.find((c) => c.channel === channel)?.values;
  const held = values?.[log.timeS.findIndex((t) => t >= fromS)] ?? Number.NaN;
  return changed(log, channel, (v, t) => (t >= fromS && t <= toS ? held : v));
}

/** A log without some of its channels. */
export function without(log: LogTable, ...names: KnownChannel[]): LogTable {
  return { ...log, channels: log.channels.filter((c) => c.channel === null || !names.includes(c.channel)) };
}

/** A log with one channel more, of one value a row. */
export function withChannel(
  log: LogTable,
  channel: KnownChannel,
  unit: string,
  value: (t: number) => number,
): LogTable {
  const added = { channel, column: channel, unitFound: unit, unit, values: log.timeS.map(value) };
  return { ...log, channels: [...log.channels, added] };
}

/** A log whose rows are some of the rows of another. */
export function rowsOf(log: LogTable, keep: (i: number) => boolean): LogTable {
  const chosen = (_: number, i: number) => keep(i);
  return {
    ...log,
    timeS: log.timeS.filter(chosen),
    channels: log.channels.map((c) => ({ ...c, values: c.values.filter(chosen) })),
  };
}

/** A log whose car is slowed by `brakeMps2` between two times, in every channel that tells its speed. */
export function braked(log: LogTable, fromS: number, toS: number, brakeMps2: number): LogTable {
  const names: KnownChannel[] = ["wheel_speed_undriven", "wheel_speed_driven", "gps_speed"];
  return names.reduce(
    (spoiled, name) =>
      changed(spoiled, name, (v, t) => v - brakeMps2 * Math.max(0, Math.min(t, toS) - fromS)),
    log,
  );
}
