import type { SampledChannel } from "@/lib/measure/run/run-signals";
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

/** Time that a car takes to reach its full acceleration from rest; common practice, no source. */
const RAMP_S = 0.2;
const RAMP_UNCERTAINTY_S = 0.07;
/** Speeds of this long after the first sound one bind the accelerometer to the speed clock. */
const BIND_S = 0.6;
/** The ramp is read up to this share of the settled acceleration, from this share of the speed reached there. */
const RAMP_SHARE = 0.85;
const RAMP_FLOOR = 0.12;

/**
 * Finds first motion. `firstS` is the first speed sample above the sensor's minimum after standing, `restSinceS` when
 * standing began. With an accelerometer its integral (zero taken while standing) is carried to the speed clock by
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
  acceleration: SampledChannel,
  firstS: number,
  restSinceS: number,
): Launch | null {
  const { times, values } = acceleration;
  const stand = lowerBound(times, Math.max(restSinceS, firstS - 3));
  const standEnd = lowerBound(times, firstS - 0.5);
  const end = lowerBound(times, firstS + BIND_S);
  if (standEnd - stand < 3 || end - standEnd < 4) return null;
  const standing = values.subarray(stand, standEnd);
  const zero = mean(standing);
  const noise = standardDeviation(standing);
  const a = values.subarray(standEnd, end).map((value) => value - zero);
  const t = times.subarray(standEnd, end);
  const v = new Float64Array(a.length);
  for (let i = 1; i < a.length; i++) v[i] = v[i - 1] + 0.5 * (a[i] + a[i - 1]) * (t[i] - t[i - 1]);
  const start = rampStart(t, a, v, noise);
  if (start === null) return null;
  const lag = bindLag(speed, firstS, t, v, start.atS);
  if (lag === null) return null;
  const timesS = [start.atS + lag];
  const speedsMps = [0];
  for (let i = 0; i < t.length; i++) {
    const at = t[i] + lag;
    if (t[i] <= start.atS || at >= firstS) continue;
    timesS.push(at);
    speedsMps.push(Math.max(v[i], speedsMps[speedsMps.length - 1]));
  }
  return {
    restS: timesS[0],
    restUncertaintyS: Math.hypot(0.01, 0.2 / acceleration.rateHz, start.uncertaintyS),
    timesS,
    speedsMps,
    by: "acceleration",
  };
}

/**
 * Start of the ramp. An even growth of acceleration makes speed begin like (t − t₀)², a soft one like (t − t₀)³: the
 * square or cube root of speed is then a straight line whose zero is t₀. Which of the two holds is not known, so the
 * middle is taken and half the way between them is its uncertainty. Null when nothing stands out of the noise.
 */
function rampStart(
  t: Float64Array,
  a: Float64Array,
  v: Float64Array,
  noise: number,
): { atS: number; uncertaintyS: number } | null {
  const settled = mean(a.subarray(Math.floor(0.7 * a.length)));
  if (!(settled > 6 * noise && settled > 0.5)) return null;
  let end = a.length - 1;
  for (let i = a.length - 2; i > 0 && a[i] + a[i + 1] > 2 * RAMP_SHARE * settled; i--) end = i;
  let first = end;
  while (first > 0 && v[first - 1] > RAMP_FLOOR * v[end]) first--;
  if (end - first < 1) first = end - 1;
  const even = rootLineZero(t, v, first, end, 1 / 2);
  const soft = rootLineZero(t, v, first, end, 1 / 3);
  if (even === null || soft === null) return null;
  return { atS: (even + soft) / 2, uncertaintyS: Math.abs(even - soft) / 2 };
}

/** Zero of the straight line through v^power over t, for the samples from `first` to `end`; null when it does not rise. */
function rootLineZero(
  t: Float64Array,
  v: Float64Array,
  first: number,
  end: number,
  power: number,
): number | null {
  const n = end - first + 1;
  let [sx, sy, sxx, sxy] = [0, 0, 0, 0];
  for (let i = first; i <= end; i++) {
    const x = t[i] - t[end];
    const y = Math.max(0, v[i]) ** power;
    sx += x;
    sy += y;
    sxx += x * x;
    sxy += x * y;
  }
  const slope = (n * sxy - sx * sy) / (n * sxx - sx * sx);
  return slope > 0 ? t[end] - (sy - slope * sx) / n / slope : null;
}

/** Time by which the speed channel follows the integrated acceleration: mean over the first sound samples. */
function bindLag(
  speed: SampledChannel,
  firstS: number,
  t: Float64Array,
  v: Float64Array,
  startS: number,
): number | null {
  let sum = 0;
  let n = 0;
  const top = v[v.length - 1];
  for (let k = lowerBound(speed.times, firstS); k < speed.times.length; k++) {
    const value = speed.values[k];
    if (speed.times[k] > firstS + BIND_S || value > top) break;
    let i = lowerBound(t, startS);
    while (i < v.length && v[i] < value) i++;
    if (i === 0 || i >= v.length || v[i] === v[i - 1]) continue;
    sum += speed.times[k] - (t[i - 1] + ((value - v[i - 1]) / (v[i] - v[i - 1])) * (t[i] - t[i - 1]));
    n++;
  }
  return n < 2 ? null : sum / n;
}

function extrapolatedLaunch(speed: SampledChannel, firstS: number): Launch {
  const first = lowerBound(speed.times, firstS);
  let last = Math.max(first + 1, lowerBound(speed.times, firstS + 0.4));
  last = Math.min(last, speed.times.length - 1);
  const slope = (speed.values[last] - speed.values[first]) / (speed.times[last] - speed.times[first]);
  const straight = speed.times[first] - speed.values[first] / slope;
  const restS = straight - RAMP_S / 2;
  const timesS: number[] = [];
  const speedsMps: number[] = [];
  for (let i = 0; i <= 10; i++) {
    const at = restS + (i / 10) * RAMP_S;
    if (at >= firstS) break;
    timesS.push(at);
    speedsMps.push((slope * (at - restS) ** 2) / (2 * RAMP_S));
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
