import type { PullSpeed } from "@/lib/measure/speed/pull-speed";
import { type RollOnTimes, rollOnTimes } from "@/lib/measure/sprint/roll-on";
import type { TraceUncertainty } from "@/lib/measure/sprint/timing-uncertainty";
import type { SpeedPair } from "@/lib/measure/sprint/timings";
import type { Span } from "@/lib/measure/types";
import { splineVariance, splineWeights } from "@/lib/signal/penalised-spline";
import { mean } from "@/lib/signal/statistics";

/** Never better known than this, m/s: what fits of several channels leave open between them [common practice, no source]. */
const LEAST_DEVIATION_MPS = 0.01;
/** Times at which the speed's noise is read, away from the ends of the pull, where no roll-on ends. */
const SHARES = [0.1, 0.3, 0.5, 0.7, 0.9];

/** Standard deviation of the fused speed inside a pull, m/s: root mean square over the pull, from the covariance of its spline. */
export function speedDeviationMps({ fit, fromS, toS }: Pick<PullSpeed, "fit" | "fromS" | "toS">): number {
  const scratch = new Float64Array(4);
  const variances = SHARES.map((share) => {
    const row = new Float64Array(fit.basis.count);
    const first = splineWeights(fit.basis, fromS + share * (toS - fromS), 0, scratch);
    row.set(scratch, first);
    return splineVariance(fit, row);
  });
  return Math.max(LEAST_DEVIATION_MPS, Math.sqrt(mean(variances)));
}

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
