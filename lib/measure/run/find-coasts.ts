import { brakedSpans } from "@/lib/measure/judge/braking";
import { accelerationRows } from "@/lib/measure/run/acceleration-rows";
import type { RunSignals } from "@/lib/measure/run/run-signals";
import { spanWithout } from "@/lib/measure/run/span-without";
import type { Span } from "@/lib/measure/types";
import { lowerBound } from "@/lib/signal/local-quadratic";
import { quantile } from "@/lib/signal/statistics";

/** The driveline needs a moment to come to rest after the gear goes out; a braked or re-engaged end is cut as well, s. */
const SETTLE_S = 0.6;
const END_S = 0.5;
/** A shorter piece, or one over less than 5 km/h, tells nothing of the resistance. */
const LEAST_PIECE_S = 2;
const LEAST_FALL_MPS = 5 / 3.6;
/** Engine speed this far off the gear's: the engine is off the wheels. */
const OFF_RATIO = 0.15;
/**
 * Where nothing tells whether the gear is out, only what slows a car no more than air, tyres and a slope of 1.5 % do is taken:
 * −a between the bounds c0 + c2·v² [common practice, no source]. An engine on the overrun adds 0.4 m/s² and more.
 */
const FREE_ROLL = { least: 0.02, c0: 0.3, c2: 5.5e-4 };

/**
 * The stretches in which the car rolls freely: load closed, engine off the wheels, speed falling gently, no brake. In order of
 * time; vehicles that may not coast for long and short strips give several pieces. `pull`: rows of the pull, which is left out;
 * `perMps`: engine speed per road speed of its gear, 1/min per m/s, null when not known.
 */
export function findCoasts(
  signals: RunSignals,
  pull: readonly [number, number] | null,
  perMps: number | null,
): Span[] {
  const { timeS, loadRows, engineRows, gearRows, speedRows } = signals;
  const told = gearRows !== null || engineRows !== null;
  const acceleration = accelerationRows(signals, 0.8);
  const closed = loadRows ? Math.min(quantile(loadRows, 0.02) + 5, 20) : 0;
  const free = (i: number): boolean => {
    const v = speedRows[i];
    if (pull && i >= pull[0] && i <= pull[1]) return false;
    if (loadRows && !(loadRows[i] <= closed)) return false;
    if (!(acceleration[i] < 0.3 && acceleration[i] > -1.8) || v < 4) return false;
    if (!told)
      return (
        acceleration[i] < -FREE_ROLL.least &&
        acceleration[i] > -(FREE_ROLL.c0 + FREE_ROLL.c2 * v * v) &&
        (!pull || i > pull[1])
      );
    if (gearRows && Number.isFinite(gearRows[i]) && Math.round(gearRows[i]) === 0) return true;
    if (!engineRows) return false;
    return perMps === null || Math.abs(engineRows[i] / (v * perMps) - 1) > OFF_RATIO;
  };
  const pieces = stretches(signals, free).flatMap((span) =>
    spanWithout(span, brakedSpans(timeS, speedRows, span)),
  );
  return pieces.filter((span) => {
    const from = lowerBound(timeS, span.from_s);
    const to = Math.min(timeS.length - 1, lowerBound(timeS, span.to_s));
    const long =
      span.to_s - span.from_s >= LEAST_PIECE_S && speedRows[from] - speedRows[to] >= LEAST_FALL_MPS;
    return long && !inGear(signals, from, to);
  });
}

/** Spans in which `free` holds but for up to 0.3 s, with both ends cut. */
function stretches({ timeS, rateHz }: RunSignals, free: (row: number) => boolean): Span[] {
  const out: Span[] = [];
  let start = -1;
  let last = -1;
  for (let i = 0; i <= timeS.length; i++) {
    const is = i < timeS.length && free(i);
    if (start >= 0 && (i === timeS.length || (!is && i - last > 0.3 * rateHz))) {
      out.push({ from_s: timeS[start] + SETTLE_S, to_s: timeS[last] - END_S });
      start = -1;
    }
    if (!is) continue;
    if (start < 0) start = i;
    last = i;
  }
  return out.filter((span) => span.to_s > span.from_s);
}

/**
 * True when engine speed falls in proportion to road speed: some gear is in. An idling engine keeps its speed, one that spins
 * down falls much faster than the car. Asked twice, of the first and of the middle third against the last, since an engine that
 * comes to its idle in between falls like the car by chance.
 */
function inGear({ timeS, speedRows, engineRows, gearRows }: RunSignals, from: number, to: number): boolean {
  if (!engineRows) return false;
  if (gearRows?.subarray(from, to + 1).every((gear) => Math.round(gear) === 0)) return false;
  const start = timeS[to] - timeS[from] > 5 ? lowerBound(timeS, timeS[from] + 2) : from;
  const third = Math.floor((to - start) / 3);
  const fall = (rows: Float64Array, part: number) => {
    const mean = (a: number) => {
      const values = rows.subarray(a, a + third).filter((x) => x > 0);
      return values.reduce((sum, x) => sum + x, 0) / values.length;
    };
    return Math.log(mean(start + part * third) / mean(start + 2 * third));
  };
  return [0, 1].every((part) => {
    const road = fall(speedRows, part);
    const share = fall(engineRows, part) / road;
    return road > 0.007 && share > 0.5 && share < 1.5;
  });
}
