import type { SampledChannel } from "@/lib/measure/run/run-signals";
import { fitRamp, type RampFit, USUAL_RAMP_S } from "@/lib/measure/sprint/ramp-fit";
import { lowerBound } from "@/lib/signal/local-quadratic";
import { mean, standardDeviation } from "@/lib/signal/statistics";

/** The start of motion as one clock sees it. Times in s of the log. */
export interface Launch {
  /** First motion on the clock of the speed channel. */
  restS: number;
  restUncertaintyS: number;
  /** Motion from rest to the first sound speed sample: times (speed clock) and speeds, both rising. */
  timesS: number[];
  speedsMps: number[];
  /** "acceleration": followed by the accelerometer; "extrapolated": drawn back from the first speeds. */
  by: "acceleration" | "extrapolated";
}

/** Without an accelerometer the half of the ramp that first speeds hide is known no better than this, s; common practice, no source. */
const RAMP_UNCERTAINTY_S = 0.08;
/** Speeds of this long after the first sound one bind the accelerometer to the speed clock. */
const BIND_S = 0.6;
/** A speed channel runs behind the accelerometer by no more than this, s, and ahead by no more than that. */
const MAX_LAG_S = 0.5;
const MAX_LEAD_S = 0.1;
const LAG_STEP_S = 0.004;
/** Speed and integrated acceleration agree to this near the start, m/s. */
const BIND_NOISE_MPS = 0.03;
/** An accelerometer reads up to 10 % high, because the car pitches under power; common practice, no source. */
const USUAL_SCALE = 1 / 1.05;
const SCALE_UNCERTAINTY = 0.05;
/** Steps into which the ramp is divided. */
const RAMP_STEPS = 12;

/**
 * Finds first motion. `firstS` is the first speed sample above the sensor's minimum after standing, `restSinceS` when
 * standing began. With an accelerometer its integral (zero taken while standing) is carried to the speed clock and scale by
 * least squares; without one the speed is drawn back linearly and half a usual ramp is added.
 */
export function findLaunch(
  speed: SampledChannel,
  acceleration: SampledChannel | null,
  firstS: number,
  restSinceS: number,
): Launch {
  return (
    (acceleration && launchByAcceleration(speed, acceleration, firstS, restSinceS)) ??
    extrapolatedLaunch(speed, firstS)
  );
}

function launchByAcceleration(
  speed: SampledChannel,
  { times, values }: SampledChannel,
  firstS: number,
  restSinceS: number,
): Launch | null {
  const stand = lowerBound(times, Math.max(restSinceS, firstS - 3));
  const standEnd = lowerBound(times, firstS - 0.9);
  const end = lowerBound(times, firstS + BIND_S + MAX_LEAD_S);
  const rampEnd = lowerBound(times, firstS + 0.35);
  if (standEnd - stand < 3 || rampEnd - standEnd < 4) return null;
  const standing = values.subarray(stand, standEnd);
  const zero = mean(standing);
  const noise = Math.max(0.02, standardDeviation(standing));
  const a = values.subarray(standEnd, end).map((value) => value - zero);
  const t = times.subarray(standEnd, end);
  const ramp = fitRamp(
    t.subarray(0, rampEnd - standEnd),
    a.subarray(0, rampEnd - standEnd),
    noise,
    t[0],
    firstS,
  );
  if (!ramp) return null;
  const motion = fromRampOn(ramp, t, a);
  const bound = bind(speed, firstS, motion);
  if (!bound) return null;
  const timesS: number[] = [];
  const speedsMps: number[] = [];
  for (let i = 0; i < motion.t.length; i++) {
    const at = motion.t[i] + bound.lagS;
    if (at >= firstS) break;
    timesS.push(at);
    speedsMps.push(Math.max(bound.scale * motion.v[i], speedsMps[speedsMps.length - 1] ?? 0));
  }
  return {
    restS: ramp.startS + bound.lagS,
    restUncertaintyS: Math.hypot(ramp.startUncertaintyS, bound.uncertaintyS),
    timesS,
    speedsMps,
    by: "acceleration",
  };
}

/** Speed on the accelerometer's clock and scale: the fitted ramp, then its own samples. */
function fromRampOn(ramp: RampFit, t: Float64Array, a: Float64Array): { t: number[]; v: number[] } {
  const at: number[] = [];
  const accel: number[] = [];
  for (let k = 0; k <= RAMP_STEPS; k++) {
    const since = (k / RAMP_STEPS) * ramp.rampS;
    at.push(ramp.startS + since);
    accel.push(ramp.level * (k / RAMP_STEPS) * (1 + ramp.trendPerS * since));
  }
  for (let i = 0; i < t.length; i++) {
    if (t[i] <= at[at.length - 1]) continue;
    at.push(t[i]);
    accel.push(a[i]);
  }
  const v = [0];
  for (let i = 1; i < at.length; i++)
    v.push(v[i - 1] + 0.5 * (accel[i] + accel[i - 1]) * (at[i] - at[i - 1]));
  return { t: at, v };
}

/**
 * Scale and lag by which integrated acceleration becomes the speed channel: mean and spread over all lags that fit, the scale
 * by least squares with the usual one as prior.
 */
function bind(
  speed: SampledChannel,
  firstS: number,
  motion: { t: number[]; v: number[] },
): { lagS: number; scale: number; uncertaintyS: number } | null {
  const from = lowerBound(speed.times, firstS);
  const to = lowerBound(speed.times, firstS + BIND_S);
  const last = motion.t[motion.t.length - 1];
  const tries: { lagS: number; scale: number; squares: number }[] = [];
  for (let lagS = -MAX_LEAD_S; lagS <= MAX_LAG_S; lagS += LAG_STEP_S) {
    let xx = (BIND_NOISE_MPS / SCALE_UNCERTAINTY) ** 2;
    let xy = USUAL_SCALE * xx;
    let yy = USUAL_SCALE * xy;
    let i = 1;
    let n = 0;
    for (let k = from; k < to; k++) {
      const at = speed.times[k] - lagS;
      if (at > last) break;
      while (motion.t[i] < at) i++;
      const u = (at - motion.t[i - 1]) / (motion.t[i] - motion.t[i - 1]);
      const x = Math.max(0, motion.v[i - 1] + u * (motion.v[i] - motion.v[i - 1]));
      xx += x * x;
      xy += x * speed.values[k];
      yy += speed.values[k] ** 2;
      n++;
    }
    // Every lag is to be judged by the same speeds.
    if (n >= 2 && speed.times[to - 1] - lagS <= last) {
      tries.push({ lagS, scale: xy / xx, squares: yy - (xy * xy) / xx });
    }
  }
  if (tries.length === 0) return null;
  const least = Math.min(...tries.map((one) => one.squares));
  const weights = tries.map((one) => Math.exp((least - one.squares) / (2 * BIND_NOISE_MPS ** 2)));
  const total = weights.reduce((sum, w) => sum + w, 0);
  const meanOf = (value: (one: (typeof tries)[number]) => number) =>
    tries.reduce((sum, one, k) => sum + weights[k] * value(one), 0) / total;
  const lagS = meanOf((one) => one.lagS);
  return {
    lagS,
    scale: meanOf((one) => one.scale),
    uncertaintyS: Math.sqrt(meanOf((one) => (one.lagS - lagS) ** 2)),
  };
}

function extrapolatedLaunch(speed: SampledChannel, firstS: number): Launch {
  const first = lowerBound(speed.times, firstS);
  let last = Math.max(first + 1, lowerBound(speed.times, firstS + 0.4));
  last = Math.min(last, speed.times.length - 1);
  const slope = (speed.values[last] - speed.values[first]) / (speed.times[last] - speed.times[first]);
  const straight = speed.times[first] - speed.values[first] / slope;
  const restS = straight - USUAL_RAMP_S / 2;
  const timesS: number[] = [];
  const speedsMps: number[] = [];
  for (let i = 0; i <= 10; i++) {
    const at = restS + (i / 10) * USUAL_RAMP_S;
    if (at >= firstS) break;
    timesS.push(at);
    speedsMps.push((slope * (at - restS) ** 2) / (2 * USUAL_RAMP_S));
  }
  const spacing = 1 / speed.rateHz;
  return {
    restS,
    restUncertaintyS: Math.hypot(RAMP_UNCERTAINTY_S, spacing / 2),
    timesS,
    speedsMps,
    by: "extrapolated",
  };
}
