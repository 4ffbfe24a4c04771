import type { KnownChannel, LogTable } from "@/lib/logs/types";
import type { Span } from "@/lib/measure/types";
import { median } from "@/lib/signal/statistics";

/** A stretch in which a channel did not tell what it should; its samples are left out before anything is computed. */
export interface SensorFault extends Span {
  channel: KnownChannel;
  kind: "frozen" | "dropout" | "jump";
  samples: number;
}

/** Channels looked at: least value at which the car moves, and least step that motion can't make [common practice, no source]. */
const WATCHED: readonly { channel: KnownChannel; moving: number; step: number }[] = [
  { channel: "wheel_speed_undriven", moving: 2, step: 0.5 },
  { channel: "wheel_speed_driven", moving: 2, step: 0.5 },
  { channel: "gps_speed", moving: 2, step: 0.5 },
  { channel: "engine_speed", moving: 1200, step: 100 },
];
/** A value that stands for less than this, or less than four usual holds, is a slow source, not a frozen one, s. */
const LEAST_FROZEN_S = 0.4;
const USUAL_HOLDS = 4;
/** A speed that falls to under this share of both sides for up to this long was not read. */
const DROP_SHARE = 0.2;
const LONGEST_DROP_S = 3;
/** Another speed that moves by this much shows that a value stood still wrongly, m/s. */
const OTHER_MOVES_MPS = 1.5;

/**
 * Stretches in which a speed channel stands still while the car does not ("frozen"), or falls to nothing and comes back
 * ("dropout"). Frozen: one value for 0.4 s and four usual holds, at whose end the value leaps by more than three usual steps, or
 * during which another speed moves. Standing at rest is none. `from_s` is the last sample that was still true. O(rows).
 */
export function sensorFaults(table: LogTable): SensorFault[] {
  const faults: SensorFault[] = [];
  for (const { channel, moving, step } of WATCHED) {
    const values = valuesOf(table, channel);
    if (!values) continue;
    const others = WATCHED.filter((w) => w.channel !== channel && w.channel !== "engine_speed").flatMap(
      (w) => valuesOf(table, w.channel) ?? [],
    );
    for (const [first, last, kind] of [
      ...frozenRows(table.timeS, values, moving, step, others).map((s) => [...s, "frozen"] as const),
      ...dropRows(table.timeS, values, moving).map((s) => [...s, "dropout"] as const),
    ]) {
      faults.push({
        channel,
        kind,
        from_s: table.timeS[first],
        to_s: table.timeS[last],
        samples: last - first + 1,
      });
    }
  }
  return faults;
}

function valuesOf(table: LogTable, channel: KnownChannel): Float64Array | null {
  return table.channels.find((c) => c.channel === channel)?.values ?? null;
}

/** A copy of the values without those of the faults; the same array where there is none. */
export function withoutFaults(
  timeS: Float64Array,
  values: Float64Array,
  faults: readonly SensorFault[],
): Float64Array {
  if (faults.length === 0) return values;
  return values.map((v, i) =>
    faults.some((f) => timeS[i] >= f.from_s && timeS[i] <= f.to_s) ? Number.NaN : v,
  );
}

function frozenRows(
  timeS: Float64Array,
  values: Float64Array,
  moving: number,
  step: number,
  others: readonly Float64Array[],
): [number, number][] {
  const holds: { first: number; last: number; leap: number }[] = [];
  let first = -1;
  for (let i = 0; i < values.length; i++) {
    if (Number.isNaN(values[i])) continue;
    if (first >= 0 && values[i] === values[first]) {
      holds[holds.length - 1].last = i;
      continue;
    }
    const leap = first < 0 ? Number.NaN : Math.abs(values[i] - values[first]);
    if (first >= 0) holds[holds.length - 1].leap = leap;
    holds.push({ first: i, last: i, leap: Number.NaN });
    first = i;
  }
  const usualHold = median(holds.map((h) => timeS[h.last] - timeS[h.first]));
  const usualLeap = median(holds.map((h) => h.leap));
  const least = Math.max(LEAST_FROZEN_S, USUAL_HOLDS * usualHold);
  return holds.flatMap(({ first: a, last: b, leap }): [number, number][] => {
    if (!(values[a] > moving) || timeS[b] - timeS[a] < least) return [];
    const leaps = leap > Math.max(step, 3 * usualLeap);
    const othersMove = others.some((other) => {
      const [from, to] = [around(other, a), around(other, b)];
      return Math.abs(to - from) > OTHER_MOVES_MPS && from > 2;
    });
    // The first sample of the hold was still a reading.
    return leaps || othersMove ? [[Math.min(a + 1, b), b]] : [];
  });
}

/** Median of the five rows round one, NaN where they hold nothing. */
function around(values: Float64Array, row: number): number {
  return median(values.subarray(Math.max(0, row - 2), row + 3));
}

function dropRows(timeS: Float64Array, values: Float64Array, moving: number): [number, number][] {
  const out: [number, number][] = [];
  let before = Number.NaN;
  let first = -1;
  for (let i = 0; i < values.length; i++) {
    const v = values[i];
    if (Number.isNaN(v)) continue;
    if (first < 0) {
      if (before > moving && v < DROP_SHARE * before) first = i;
      else before = v;
      continue;
    }
    if (v < DROP_SHARE * before) {
      if (timeS[i] - timeS[first] > LONGEST_DROP_S) {
        before = v;
        first = -1;
      }
      continue;
    }
    // Back near where it was: the car can't have stopped and started in so short a time.
    if (v > 0.6 * before && v < 1.7 * before) out.push([first, lastBefore(values, i)]);
    before = v;
    first = -1;
  }
  return out;
}

function lastBefore(values: Float64Array, row: number): number {
  let i = row - 1;
  while (i > 0 && Number.isNaN(values[i])) i--;
  return i;
}
