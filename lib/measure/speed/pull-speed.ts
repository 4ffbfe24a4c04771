import { adaptiveSmoothing } from "@/lib/measure/speed/adaptive-smoothing";
import {
  chooseSmoothing,
  kernelWidthS,
  type SpeedSeries,
  type SpeedStretch,
  smoothSpeed,
  speedStretch,
} from "@/lib/measure/speed/smooth-speed";
import {
  between,
  type ChannelModel,
  SPEED_SOURCES,
  type SpeedModel,
  type SpeedRun,
  slips,
  tipInS,
} from "@/lib/measure/speed/speed-model";
import type { Span } from "@/lib/measure/types";
import { type SplineFit, splineAt } from "@/lib/signal/penalised-spline";
import { median } from "@/lib/signal/statistics";

/** The fused speed of one pull. */
export interface PullSpeed {
  fit: SplineFit;
  fromS: number;
  toS: number;
  tipInS: number;
  /** Width of the smoothing kernel at a time, s: detail much finer than it is rounded off. */
  kernelS: (t: number) => number;
  /** False for a first fit on driven channels alone: their slip is still in it. */
  slipTaken: boolean;
  /** Spans in which the driven wheels or the clutch slipped beyond drive creep. */
  slipping: (Span & { code: "wheel_spin" | "clutch_slip" })[];
}

/** Driven channels ring after tip-in for so long: left out, s [common practice, no source]. */
const RINGING_S = 0.7;
/** Samples farther than this from the earlier fit are reading errors: standard deviations, and at least a share of the speed. */
const OUTLIER_DEVIATIONS = 6;
const OUTLIER_SHARE = 0.003;
/** Slip beyond drive creep by this much is wheel spin (measurement.md 7.6), as a share of speed. */
const SPIN_SHARE = 0.02;

/**
 * Smooths every pull on all its speed channels together; the smoothing is chosen once for all pulls of the campaign.
 * `sharing`: how many pulls are averaged into a side, for the final, adaptive smoothing; null for an even one.
 */
export function pullSpeeds(
  runs: readonly SpeedRun[],
  model: SpeedModel,
  forceN: (run: number, speedMps: number, accelerationMps2: number, t: number) => number,
  earlier: readonly (PullSpeed | null)[] | null,
  sharing: number | null,
): (PullSpeed | null)[] {
  const stretches: (SpeedStretch | null)[] = runs.map((run, index) => {
    const { pull } = run.segments;
    if (!pull) return null;
    const tip = tipInS(run.segments);
    const before = earlier?.[index] ?? null;
    const seriesOf = (wanted: (reading: ChannelModel) => boolean) =>
      SPEED_SOURCES.flatMap((source): SpeedSeries[] => {
        const reading = model.channels.get(source);
        if (!reading || !wanted(reading)) return [];
        const one = roadSpeedSeries(run, reading, model, before, tip, (v, a, t) => forceN(index, v, a, t));
        return one ? [one] : [];
      });
    // Without an earlier fit there is no force to correct slip with: free-rolling channels only, unless there is none.
    let series = seriesOf((reading) => before !== null || !reading.slips || model.base === reading.source);
    if (series.length === 0) series = seriesOf(() => true);
    return series.length === 0 ? null : speedStretch(series, tip, pull.to_s, 0.1, tip);
  });
  const present = stretches.filter((s) => s !== null);
  if (present.length === 0) return runs.map(() => null);
  const floor = floorS(runs, model);
  const even = chooseSmoothing(present, floor);
  const smoothing = sharing === null ? even : adaptiveSmoothing(present, even, sharing, floor);
  return stretches.map((stretch, index): PullSpeed | null => {
    const { pull } = runs[index].segments;
    if (!stretch || !pull) return null;
    const fit = smoothSpeed(stretch, smoothing);
    const slipping = earlier?.[index]?.slipping ?? [];
    return {
      fit,
      fromS: tipInS(runs[index].segments),
      toS: pull.to_s,
      tipInS: tipInS(runs[index].segments),
      kernelS: (t) => kernelWidthS(stretch, smoothing, t),
      slipTaken: earlier !== null || !slips(model.base),
      slipping,
    };
  });
}

/** Least kernel width: two samples of the fastest channel, and more for logs that only a slow GPS tells the speed of. */
function floorS(runs: readonly SpeedRun[], model: SpeedModel): number {
  let rate = 0;
  let onlyGps = true;
  for (const { signals } of runs) {
    for (const source of model.channels.keys()) {
      rate = Math.max(rate, signals[source]?.rateHz ?? 0);
      if (source !== "gps" && signals[source]) onlyGps = false;
    }
  }
  return Math.max(0.06, (onlyGps ? 2 : 0.8) / Math.max(rate, 1));
}

/** One channel as road speed: scale, lag and drive slip taken out; slipping spans and ringing left out. */
function roadSpeedSeries(
  run: SpeedRun,
  reading: ChannelModel,
  model: SpeedModel,
  earlier: PullSpeed | null,
  tip: number,
  forceN: (speedMps: number, accelerationMps2: number, t: number) => number,
): SpeedSeries | null {
  const channel = run.signals[reading.source];
  const { pull } = run.segments;
  if (!channel || !pull) return null;
  const from = tip + (reading.slips && model.base !== reading.source ? RINGING_S : 0);
  const [a, b] = between(channel, from + reading.lagS, pull.to_s + reading.lagS);
  if (b - a < 2) return null;
  const scratch = new Float64Array(4);
  const times = new Float64Array(b - a);
  const values = new Float64Array(b - a);
  for (let i = a; i < b; i++) {
    const t = channel.times[i] - reading.lagS;
    times[i - a] = t;
    let value = channel.values[i] / reading.scale;
    if (reading.slips && earlier) {
      const speed = splineAt(earlier.fit.basis, earlier.fit.coefficients, t, 0, scratch);
      const acceleration = splineAt(earlier.fit.basis, earlier.fit.coefficients, t, 1, scratch);
      value /= 1 + model.slipPerN * forceN(speed, acceleration, t);
      if (earlier.slipping.some((span) => t >= span.from_s && t <= span.to_s)) value = Number.NaN;
    }
    if (earlier) {
      const expected = splineAt(earlier.fit.basis, earlier.fit.coefficients, t, 0, scratch);
      const compared = earlier.slipTaken ? value : channel.values[i] / reading.scale;
      if (
        Math.abs(compared - expected) >
        Math.max(OUTLIER_DEVIATIONS * reading.deviationMps, OUTLIER_SHARE * expected)
      )
        value = Number.NaN;
    }
    values[i - a] = value;
  }
  return { times, values, weight: 1 / reading.deviationMps ** 2 };
}

/**
 * Spans of a pull in which a driven channel runs ahead of the road speed by more than 2 % beyond drive creep, in the median over
 * 0.15 s; widened by 0.15 s to each side. The driven wheel tells wheel spin; engine speed alone tells clutch slip.
 */
export function findSlipping(
  run: SpeedRun,
  model: SpeedModel,
  pull: PullSpeed,
  forceN: (speedMps: number, accelerationMps2: number, t: number) => number,
): PullSpeed["slipping"] {
  const out: PullSpeed["slipping"] = [];
  if (model.base === "driven" || model.base === "engineSpeed") return out;
  const scratch = new Float64Array(4);
  for (const source of ["driven", "engineSpeed"] as const) {
    const channel = run.signals[source];
    const reading = model.channels.get(source);
    if (!channel || !reading) continue;
    const [a, b] = between(channel, pull.fromS + 0.4 + reading.lagS, pull.toS);
    const width = Math.max(1, Math.round(0.15 * channel.rateHz));
    const excess = Array.from({ length: b - a }, (_, k) => {
      const t = channel.times[a + k] - reading.lagS;
      const speed = splineAt(pull.fit.basis, pull.fit.coefficients, t, 0, scratch);
      const acceleration = splineAt(pull.fit.basis, pull.fit.coefficients, t, 1, scratch);
      return (
        channel.values[a + k] /
          reading.scale /
          speed /
          (1 + model.slipPerN * forceN(speed, acceleration, t)) -
        1
      );
    });
    for (let k = 0; k + width <= excess.length; k++) {
      if (median(excess.slice(k, k + width)) < SPIN_SHARE) continue;
      const from = channel.times[a + k] - 0.15;
      const to = channel.times[a + k + width - 1] + 0.15;
      const last = out[out.length - 1];
      if (last && from <= last.to_s && to >= last.from_s) last.to_s = Math.max(last.to_s, to);
      else if (!out.some((span) => from <= span.to_s && to >= span.from_s)) {
        out.push({
          from_s: from,
          to_s: to,
          code: source === "driven" || !run.signals.driven ? "wheel_spin" : "clutch_slip",
        });
      }
    }
  }
  return out;
}
