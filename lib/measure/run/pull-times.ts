import { type RollOnTimes, rollOnTimes } from "@/lib/measure/sprint/roll-on";
import type { TraceUncertainty } from "@/lib/measure/sprint/timing-uncertainty";
import type { SpeedPair } from "@/lib/measure/sprint/timings";
import type { Span } from "@/lib/measure/types";

/**
 * Roll-on times of a pull. A time that runs through one of the `broken` spans (a lift, a gap, a speed that was not read) is not that
 * of full load, or not known, and is absent; wheel spin is what the car did and stays. `timeS` rising, s; speeds in m/s.
 */
export function pullTimes(
  timeS: Float64Array,
  speedMps: Float64Array,
  broken: readonly Span[],
  of: TraceUncertainty,
  pairs: readonly SpeedPair[],
): RollOnTimes {
  const whole: RollOnTimes = { times_s: {}, times_uncertainty_s: {}, sensitivityS: {} };
  let start = 0;
  for (let i = 0; i <= timeS.length; i++) {
    const cut = i === timeS.length || broken.some((s) => timeS[i] >= s.from_s && timeS[i] <= s.to_s);
    if (!cut) continue;
    const part = rollOnTimes(timeS.subarray(start, i), speedMps.subarray(start, i), of, pairs);
    Object.assign(whole.times_s, part.times_s);
    Object.assign(whole.times_uncertainty_s, part.times_uncertainty_s);
    Object.assign(whole.sensitivityS, part.sensitivityS);
    start = i + 1;
  }
  return whole;
}
