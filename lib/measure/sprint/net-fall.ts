import type { SampledChannel } from "@/lib/measure/run/run-signals";
import { type MotionTrace, traceAt } from "@/lib/measure/sprint/acceleration";
import type { FallSource, RunTimings } from "@/lib/measure/sprint/time-types";
import type { Leg, Note } from "@/lib/measure/types";
import { lowerBound } from "@/lib/signal/local-quadratic";
import { mean } from "@/lib/signal/statistics";

/** Fall of the road over a run, positive downhill, in percent of the way, with its standard uncertainty. */
export interface NetFall {
  pct: number;
  uncertaintyPct: number;
  from: FallSource;
}

/** Satellite height wanders by this much, m, with this time constant, s; common practice, no source. */
const WANDER_M = 0.5;
const WANDER_S = 30;
/** Heights are averaged over this long at each end, s. */
const END_S = 1.5;
/** Over less way than this, height tells nothing of slope, m. */
const LEAST_WAY_M = 50;
/** Runs on one road agree on its fall within this many standard deviations (root mean square). */
const AGREEMENT = 2;
/** Out and back, or a run without height, may see another stretch whose fall differs by this, %; common practice, no source. */
const OTHER_STRETCH_PCT = 0.15;
/** The effect of a fall is worked out to first order and without rotating masses: good to this share. */
const FIRST_ORDER = 0.15;

/** End-height difference over distance between two times of one run; null without a live altitude or with too little way. */
export function ownFall(
  altitude: SampledChannel | null,
  trace: MotionTrace,
  fromS: number,
  toS: number,
): NetFall | null {
  if (!altitude || new Set(altitude.values).size < 2) return null;
  const { times, values } = altitude;
  const part = (low: number, high: number) =>
    values.subarray(lowerBound(times, low), lowerBound(times, high));
  const start = part(fromS - END_S, fromS + 0.2);
  const end = part(toS - END_S, toS + 0.2);
  if (start.length === 0 || end.length === 0) return null;
  const wayM = traceAt(trace, toS - END_S / 2, "wayM");
  if (!(wayM >= LEAST_WAY_M)) return null;
  const wander = WANDER_M * Math.sqrt(2 * (1 - Math.exp(-(toS - fromS) / WANDER_S)));
  return {
    pct: (100 * (mean(start) - mean(end))) / wayM,
    uncertaintyPct: (100 * Math.hypot(wander, 0.1)) / wayM,
    from: "altitude",
  };
}

interface FallOfRun {
  leg: Leg | null;
  roadDay: string | null;
  fall: NetFall | null;
}

/**
 * Pools the falls of one road day: runs of one leg see the same road, those of the other leg see it with the opposite sign and
 * only about the same stretch, so they weigh less. The weighted mean is known better than each, and a run without height has
 * it too; what the coast-downs tell is one estimate of the day already. Where the runs do not agree, each keeps its own.
 */
export function pooledFalls(runs: readonly FallOfRun[]): (NetFall | null)[] {
  return runs.map((run) => {
    const mates = runs.flatMap((mate) =>
      mate.fall?.from === "altitude" && mate.leg && mate.roadDay === run.roadDay
        ? [
            {
              pct: mate.leg === run.leg ? mate.fall.pct : -mate.fall.pct,
              u: Math.hypot(mate.fall.uncertaintyPct, mate.leg === run.leg ? 0 : OTHER_STRETCH_PCT),
            },
          ]
        : [],
    );
    if (!run.leg || mates.length < 2 || run.fall?.from === "road day") return run.fall;
    const weight = mates.reduce((sum, { u }) => sum + 1 / (u * u), 0);
    const pct = mates.reduce((sum, mate) => sum + mate.pct / mate.u ** 2, 0) / weight;
    const chi = Math.sqrt(mean(mates.map((mate) => ((mate.pct - pct) / mate.u) ** 2)));
    if (chi > AGREEMENT) return run.fall;
    const own = 1 / Math.sqrt(weight);
    return {
      pct,
      uncertaintyPct: run.fall ? own : Math.hypot(own, OTHER_STRETCH_PCT),
      from: "pooled altitude",
    };
  });
}

/**
 * The effect of a fall on each time: seconds that it adds (negative: the run was faster for it) with their standard uncertainty.
 * `sensitivityS` = seconds that 1 % of fall takes off each time. Without a known fall there are no effects.
 */
export function fallResult(fall: NetFall | null, sensitivityS: Readonly<Record<string, number>>): RunTimings {
  const effects: Record<string, number> = {};
  const uncertainties: Record<string, number> = {};
  if (fall) {
    for (const [name, perPct] of Object.entries(sensitivityS)) {
      effects[name] = -perPct * fall.pct;
      uncertainties[name] = Math.hypot(perPct * fall.uncertaintyPct, FIRST_ORDER * effects[name]);
    }
  }
  return {
    net_fall_pct: fall?.pct ?? null,
    net_fall_uncertainty_pct: fall?.uncertaintyPct ?? null,
    net_fall_from: fall?.from ?? null,
    fall_effect_s: effects,
    fall_effect_uncertainty_s: uncertainties,
  };
}

/** Says that a sprint's fall is beyond the limit, or not known. */
export function fallNote(fall: NetFall | null, limitPct: number): Note | null {
  if (!fall) {
    return {
      code: "net_fall_not_known",
      message:
        "The log has no usable altitude, so the net fall of the road is not known and its effect on the times can't be stated. Log altitude, and drive the same road both ways.",
    };
  }
  if (Math.abs(fall.pct) <= limitPct) return null;
  return {
    code: "net_fall_beyond_limit",
    message: `The road ${fall.pct > 0 ? "falls" : "rises"} by ${Math.abs(fall.pct).toFixed(2)} % ± ${(2 * fall.uncertaintyPct).toFixed(2)} % over the run; the limit is ${limitPct} %. Drive both ways: the mean of out and back is the result.`,
  };
}
