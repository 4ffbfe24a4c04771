import type { Span } from "@/lib/measure/types";
import { median, robustDeviation } from "@/lib/signal/statistics";

/** Slope of speed over a short window of a coast-down. */
interface Slope {
  t: number;
  v: number;
  decelerationMps2: number;
}

/** Windows tried, s: the first whose slopes scatter little enough is used. */
const WINDOWS_S = [0.6, 1, 1.6, 2.5];
const FINE_SCATTER_MPS2 = 0.06;
/** A brake that is touched slows by more than this beyond the free roll; hills and gusts stay below [common practice, no source]. */
const LEAST_BRAKE_MPS2 = 0.3;
/** A brake comes on and off at once; the steepest road changes its slope by less than this within the time below. */
const LEAST_STEP_MPS2 = 0.25;
const STEP_WITHIN_S = 0.6;
/** Cut more than is seen: the pedal's own ramp lies outside the window that shows it, s. */
const MARGIN_S = 0.25;
/** Free roll of road cars, −a = c0 + c2·v²: rolling and slope, and drag per mass [common practice, no source]. */
const FREE_ROLL = { c0: [-0.1, 0.4], c2: [0, 9e-4], usualC2: 2.7e-4 } as const;
/** Beside the free roll by up to this still counts as agreeing with it, m/s². */
const AGREEING_MPS2 = 0.12;
const MOST_POINTS = 48;

/**
 * Spans of a coast-down in which something other than the road slows the car: a brake, or an engine in gear.
 * The free roll −a = c0 + c2·v² is the one that most windows agree with; what lies above it by 0.3 m/s² (or five robust deviations)
 * and comes or goes within 0.6 s is braked. `speedMps` has one value a row of `timeS` (rising, s), NaN = missing; `span` is the
 * part to look at. Spans come in order, widened by 0.25 s, inside `span`. Under 3 s nothing can be told: none.
 */
export function brakedSpans(timeS: Float64Array, speedMps: Float64Array, span: Span): Span[] {
  const { slopes, windowS } = slopesOf(timeS, speedMps, span);
  if (slopes.length < 6) return [];
  const free = freeRoll(slopes);
  const excess = slopes.map((s) => s.decelerationMps2 - free.c0 - free.c2 * s.v * s.v);
  const scatter = robustDeviation(excess.filter((x) => Math.abs(x) < AGREEING_MPS2));
  const limit = Math.max(LEAST_BRAKE_MPS2, 5 * (Number.isFinite(scatter) ? scatter : 0));
  const reach = windowS + STEP_WITHIN_S;
  const excessAt = (t: number) => {
    let best = 0;
    for (let k = 1; k < slopes.length; k++)
      if (Math.abs(slopes[k].t - t) < Math.abs(slopes[best].t - t)) best = k;
    return excess[best];
  };
  const found: Span[] = [];
  for (let k = 0; k < slopes.length; k++) {
    if (!(excess[k] > limit / 2)) continue;
    const first = k;
    while (k + 1 < slopes.length && excess[k + 1] > limit / 2) k++;
    const inside = excess.slice(first, k + 1);
    const top = inside.reduce((most, x) => Math.max(most, x), 0);
    const steps = inside.some(
      (x, i) =>
        x > limit &&
        Math.max(x - excessAt(slopes[first + i].t - reach), x - excessAt(slopes[first + i].t + reach)) >
          LEAST_STEP_MPS2,
    );
    if (!(steps || top > 3 * limit)) continue;
    found.push({
      from_s: Math.max(span.from_s, slopes[first].t - windowS / 2 - MARGIN_S),
      to_s: Math.min(span.to_s, slopes[k].t + windowS / 2 + MARGIN_S),
    });
  }
  return joined(found);
}

function joined(spans: readonly Span[]): Span[] {
  const out: Span[] = [];
  for (const span of spans) {
    const last = out[out.length - 1];
    if (last && span.from_s <= last.to_s) last.to_s = Math.max(last.to_s, span.to_s);
    else out.push({ ...span });
  }
  return out;
}

/** Straight-line slopes over the shortest window that is fine enough, half a window apart. */
function slopesOf(
  timeS: Float64Array,
  speedMps: Float64Array,
  span: Span,
): { slopes: Slope[]; windowS: number } {
  let slopes: Slope[] = [];
  let windowS = WINDOWS_S[0];
  for (windowS of WINDOWS_S) {
    slopes = slopesOver(timeS, speedMps, span, windowS);
    // Every second window shares no sample with the next.
    const apart = slopes.filter((_, k) => k % 2 === 0).map((s) => s.decelerationMps2);
    const changes = apart.slice(1).map((x, k) => Math.abs(x - apart[k]));
    if (changes.length > 3 && (1.4826 * median(changes)) / Math.SQRT2 <= FINE_SCATTER_MPS2) break;
  }
  return { slopes, windowS };
}

/** A window with a recording gap in it tells no slope: at least half the usual rows must be there. */
function slopesOver(timeS: Float64Array, speedMps: Float64Array, span: Span, windowS: number): Slope[] {
  const out: Slope[] = [];
  const usualStepS = median(timeS.subarray(1).map((t, i) => t - timeS[i]));
  let from = 0;
  for (let start = span.from_s; start + windowS <= span.to_s + 1e-9; start += windowS / 2) {
    while (from < timeS.length && timeS[from] < start) from++;
    let n = 0;
    let sumT = 0;
    let sumV = 0;
    let sumTT = 0;
    let sumTV = 0;
    for (let i = from; i < timeS.length && timeS[i] <= start + windowS; i++) {
      if (Number.isNaN(speedMps[i])) continue;
      const t = timeS[i] - start;
      n++;
      sumT += t;
      sumV += speedMps[i];
      sumTT += t * t;
      sumTV += t * speedMps[i];
    }
    const spread = sumTT - (sumT * sumT) / n;
    if (n < Math.max(3, (0.5 * windowS) / usualStepS) || !(spread > 0)) continue;
    out.push({
      t: start + windowS / 2,
      v: sumV / n,
      decelerationMps2: -(sumTV - (sumT * sumV) / n) / spread,
    });
  }
  return out;
}

/** The free roll that most windows agree with, tried through every pair of a thinned choice; the lower of two equals. */
function freeRoll(slopes: readonly Slope[]): { c0: number; c2: number } {
  const step = Math.max(1, Math.ceil(slopes.length / MOST_POINTS));
  const points = slopes.filter((_, k) => k % step === 0);
  let best = { c0: 0.15, c2: FREE_ROLL.usualC2 as number };
  let most = -1;
  const attempt = (c0: number, c2: number) => {
    if (c0 < FREE_ROLL.c0[0] || c0 > FREE_ROLL.c0[1] || c2 < FREE_ROLL.c2[0] || c2 > FREE_ROLL.c2[1]) return;
    let score = 0;
    for (const p of points) {
      const share = (p.decelerationMps2 - c0 - c2 * p.v * p.v) / AGREEING_MPS2;
      if (share > -1 && share < 1) score += 1 - share * share;
    }
    if (score > most || (score === most && c0 < best.c0)) {
      most = score;
      best = { c0, c2 };
    }
  };
  points.forEach((p, i) => {
    attempt(p.decelerationMps2 - FREE_ROLL.usualC2 * p.v * p.v, FREE_ROLL.usualC2);
    for (let j = 0; j < i; j++) {
      const q = points[j];
      const apart = p.v * p.v - q.v * q.v;
      if (Math.abs(apart) < 60) continue;
      const c2 = (p.decelerationMps2 - q.decelerationMps2) / apart;
      attempt(p.decelerationMps2 - c2 * p.v * p.v, c2);
    }
  });
  return best;
}
