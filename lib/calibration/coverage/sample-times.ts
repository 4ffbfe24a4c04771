import type { CoverageChannel } from "@/lib/calibration/coverage/types";
import { median } from "@/lib/signal/statistics";

/** A step longer than this, or than three times the usual one, is a gap (common practice, no source). */
const LONGEST_STEP_S = 1;
const USUAL_STEPS = 3;
/** Between two own samples further apart than this, a channel is missing (common practice, no source). */
const LONGEST_OWN_GAP_S = 0.5;

/** What each sample of a run is worth, and whether the step that leads to it counts. */
export interface SampleTimes {
  /** Seconds: half of each neighbouring step that counts. */
  worthS: Float64Array;
  /** 1 = the step from the sample before counts, 0 = there is a gap, or nothing, in front. */
  joined: Uint8Array;
}

function stepsOf(timeS: Float64Array): Float64Array {
  const steps = new Float64Array(Math.max(0, timeS.length - 1));
  for (let i = 1; i < timeS.length; i++) steps[i - 1] = timeS[i] - timeS[i - 1];
  return steps;
}

/** The usual step of a channel's own times in s where it is too long to tell what lies between; null where it is not. */
export function tooLongStepS({ timeS: own }: CoverageChannel): number | null {
  const usual = own ? median(stepsOf(own)) : 0;
  return usual > LONGEST_OWN_GAP_S ? usual : null;
}

/** Shares the time of a run (s, rising) among its samples; steps that are gaps, or do not rise, are nobody's. */
export function sampleTimes(timeS: Float64Array): SampleTimes {
  const n = timeS.length;
  const worthS = new Float64Array(n);
  const joined = new Uint8Array(n);
  const steps = stepsOf(timeS);
  const longest = Math.min(LONGEST_STEP_S, USUAL_STEPS * median(steps));
  for (let i = 1; i < n; i++) {
    const step = steps[i - 1];
    if (!(step > 0 && step <= longest)) continue;
    joined[i] = 1;
    worthS[i - 1] += step / 2;
    worthS[i] += step / 2;
  }
  return { worthS, joined };
}

/**
 * A channel at the run's times: as it is, or from its own times by a straight line between two samples at most 0.5 s apart; NaN
 * elsewhere, and where a sample is missing.
 */
export function atTimes({ values, timeS: own }: CoverageChannel, timeS: Float64Array): Float64Array {
  if (!own || own === timeS) return values;
  const found = new Float64Array(timeS.length).fill(Number.NaN);
  let k = 0;
  for (let i = 0; i < timeS.length; i++) {
    const t = timeS[i];
    while (k + 1 < own.length && own[k + 1] <= t) k++;
    if (!(own[k] <= t)) continue;
    if (own[k] === t) found[i] = values[k];
    else if (k + 1 < own.length && own[k + 1] - own[k] <= LONGEST_OWN_GAP_S)
      found[i] = values[k] + ((t - own[k]) / (own[k + 1] - own[k])) * (values[k + 1] - values[k]);
  }
  return found;
}
