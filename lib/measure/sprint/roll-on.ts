import { motionTrace, speedCrossingS } from "@/lib/measure/sprint/acceleration";
import { fallSensitivity } from "@/lib/measure/sprint/fall-sensitivity";
import { speedEnd, type TraceUncertainty, timeUncertaintyS } from "@/lib/measure/sprint/timing-uncertainty";
import { type SpeedPair, STANDARD_TIMINGS } from "@/lib/measure/sprint/timings";

/** Times of one run with their standard uncertainty, by name; a time that the run does not cover is absent. */
export interface RunTimes {
  times_s: Record<string, number>;
  times_uncertainty_s: Record<string, number>;
}

/** Times between two speeds, with the seconds that 1 % of fall takes off each. */
export interface RollOnTimes extends RunTimes {
  sensitivityS: Record<string, number>;
}

/**
 * Roll-on times of a speed trace, of every pair that does not begin at rest: also of a pull, when only its full-load part in one
 * gear is passed. Gaps must not be in it. Fewer than two samples give no times.
 */
export function rollOnTimes(
  timeS: Float64Array,
  speedMps: Float64Array,
  of: TraceUncertainty,
  pairs: readonly SpeedPair[] = STANDARD_TIMINGS.pairs,
): RollOnTimes {
  const result: RollOnTimes = { times_s: {}, times_uncertainty_s: {}, sensitivityS: {} };
  if (timeS.length < 2) return result;
  const trace = motionTrace(timeS, speedMps);
  const fall = fallSensitivity(trace);
  for (const { name, fromMps, toMps } of pairs) {
    const from = fromMps > 0 ? speedCrossingS(trace, fromMps) : null;
    const to = from === null ? null : speedCrossingS(trace, toMps, from);
    if (from === null || to === null) continue;
    result.times_s[name] = to - from;
    result.times_uncertainty_s[name] = timeUncertaintyS(
      speedEnd(trace, from, of),
      speedEnd(trace, to, of),
      to - from,
      of.scale,
    );
    result.sensitivityS[name] = fall.ofSpeedS(to) - fall.ofSpeedS(from);
  }
  return result;
}
