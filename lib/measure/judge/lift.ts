import { fixed } from "@/lib/measure/judge/words";
import type { Segments } from "@/lib/measure/run/find-segments";
import type { RunSignals } from "@/lib/measure/run/run-signals";
import type { Note } from "@/lib/measure/types";
import { median, quantile } from "@/lib/signal/statistics";

/** After a lift, torque needs this long to be that of a held pedal again (boost, take-up) [common practice, no source], s. */
const RECOVERY_S = 0.5;
const BEFORE_S = 0.1;
/** A lift that ends later than this after the pull is another acceleration, s. */
const SAME_PULL_S = 3;
/** Neighbouring gears differ by more than this [common practice, no source]. */
const GEAR_STEP = 0.12;

interface Lift {
  first: number;
  last: number;
}

/**
 * Stretches in which the driver lifted: short dips inside the pull, and longer ones that end it or come before it while full load
 * follows or went before within 3 s in the same gear. Masked: torque of a lift and of half a second after it is not that of full
 * load. Without a pedal or throttle channel it says that full load is taken on trust.
 */
export function liftNotes(signals: RunSignals, { pull }: Segments): Note[] {
  const { loadRows, timeS } = signals;
  if (!pull) return [];
  if (!loadRows) {
    return [
      {
        code: "load_not_logged",
        consequence: "warned",
        ...pull,
        message:
          "Neither pedal nor throttle is in the log: full load is taken on trust from the acceleration, and a lift could pass for a weak engine. Log the pedal.",
      },
    ];
  }
  const top = quantile(loadRows, 0.995);
  const limit = Math.max(55, 0.93 * top);
  return liftsIn(loadRows, timeS, limit, pull.from_s - SAME_PULL_S, pull.to_s + SAME_PULL_S).flatMap(
    ({ first, last }): Note[] => {
      const from = timeS[first];
      const to = timeS[last];
      if (to < pull.from_s - SAME_PULL_S || from > pull.to_s + 0.3) return [];
      if (changesGear(signals, first, last)) return [];
      const deepest = loadRows.subarray(first, last + 1).reduce((low, x) => Math.min(low, x), 100);
      const inside = from > pull.from_s && to < pull.to_s;
      const rest = inside
        ? "the engine speeds in it and just after are left out"
        : "only the longer part of the pull is used";
      return [
        {
          code: "lift",
          consequence: "masked",
          from_s: from - BEFORE_S,
          to_s: inside ? Math.min(pull.to_s, to + RECOVERY_S) : to,
          message: `The pedal falls to ${fixed(deepest, 0)} % for ${fixed(to - from + 1 / signals.rateHz, 2)} s during the pull; ${rest}. Hold full load through to the red line.`,
        },
      ];
    },
  );
}

/** Row stretches below full load that lie between two stretches of full load of 0.3 s or more. */
function liftsIn(load: Float64Array, timeS: Float64Array, limit: number, fromS: number, toS: number): Lift[] {
  const lifts: Lift[] = [];
  let fullSince = -1;
  let open: Lift | null = null;
  for (let i = 0; i < load.length && timeS[i] <= toS; i++) {
    if (timeS[i] < fromS || Number.isNaN(load[i])) continue;
    if (load[i] >= limit) {
      if (fullSince < 0) fullSince = i;
      if (open && timeS[i] - timeS[fullSince] >= 0.3) {
        lifts.push(open);
        open = null;
      }
      continue;
    }
    if (fullSince >= 0) {
      if (open) open.last = i;
      else if (timeS[i - 1] - timeS[fullSince] >= 0.3) open = { first: i, last: i };
    } else if (open) open.last = i;
    fullSince = -1;
  }
  return lifts;
}

/** Whether engine and road speed fit another gear after the lift than before it, or the gear channel says so. */
function changesGear(
  { engineRows, gearRows, speedRows, rateHz }: RunSignals,
  first: number,
  last: number,
): boolean {
  const width = Math.max(2, Math.round(0.3 * rateHz));
  const before = [Math.max(0, first - width), first] as const;
  const after = [last + 1, last + 1 + width] as const;
  if (gearRows) {
    const [a, b] = [before, after].map(([x, y]) => median(gearRows.subarray(x, y)));
    if (Number.isFinite(a) && Number.isFinite(b)) return Math.round(a) !== Math.round(b);
  }
  if (!engineRows) return false;
  const ratio = ([x, y]: readonly [number, number]) =>
    median(engineRows.subarray(x, y).map((n, k) => n / Math.max(1, speedRows[x + k])));
  return Math.abs(ratio(after) / ratio(before) - 1) > GEAR_STEP;
}
