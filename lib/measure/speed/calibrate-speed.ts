import type { SampledChannel } from "@/lib/measure/run/run-signals";
import {
  chooseSmoothing,
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
  type SpeedSource,
  slips,
  tipInS,
} from "@/lib/measure/speed/speed-model";
import {
  addRow,
  type NormalSolution,
  normalEquations,
  solveNormal,
  varianceOf,
} from "@/lib/signal/normal-equations";
import { type SplineFit, splineAt } from "@/lib/signal/penalised-spline";
import { median } from "@/lib/signal/statistics";

/** What is believed before any log is read. Slip of a car tyre: 1 to 3 % at full load (from memory), here per newton. */
export const PRIOR = { slipPerN: 2e-6, slipSd: 1.5e-6, lagSd: 0.15, wheelScaleSd: 0.03, engineScaleSd: 0.03 };

/** Drive force in N of a run at a road speed, an acceleration and a time. */
export type ForceModel = (run: SpeedRun, speedMps: number, accelerationMps2: number, t: number) => number;

/** A coast-down tells scale and lag many times over: at most so many samples a channel and run are used. */
const MOST_COAST_SAMPLES = 400;

interface Equation {
  source: SpeedSource;
  value: number;
  speed: number;
  acceleration: number;
  forceN: number;
}

/** White noise of a channel from its second differences (robust), never below what its step makes: step/√12. */
function channelNoise(channel: SampledChannel, fromS: number, toS: number): number {
  const [a, b] = between(channel, fromS, toS);
  const bends: number[] = [];
  let step = Number.POSITIVE_INFINITY;
  for (let i = a + 1; i < b - 1; i++) {
    const jump = Math.abs(channel.values[i] - channel.values[i - 1]);
    if (jump > 0 && jump < step) step = jump;
    bends.push(Math.abs(channel.values[i - 1] - 2 * channel.values[i] + channel.values[i + 1]));
  }
  if (bends.length === 0) return Number.NaN;
  return Math.max((1.4826 * median(bends)) / Math.sqrt(6), Number.isFinite(step) ? step / Math.sqrt(12) : 0);
}

/**
 * Estimates scale, lag and slip of every speed channel over all runs of a campaign, by weighted least squares on a smooth
 * base speed (undriven wheel, else GPS, else driven wheel, else engine speed) with weak priors and Huber weights.
 * `forceN` is the drive force; `perMps` the stated engine speed per road speed, 1/min per m/s.
 * `earlier`: a first model, whose lags the base speed is shifted by, so that only small lags are left to be linear.
 * GPS sets the absolute scale where logged (its Doppler speed has no scale error to speak of), else the wheel.
 */
export function calibrateSpeed(
  runs: readonly SpeedRun[],
  forceN: ForceModel,
  perMps: number | null,
  masked: (run: SpeedRun, t: number) => boolean,
  earlier: SpeedModel | null,
): SpeedModel {
  const has = (source: SpeedSource) => runs.filter((run) => run.signals[source]).length;
  const base = SPEED_SOURCES.find((source) => has(source) === runs.length) ?? mostCommon(has);
  const based = runs.filter((run) => run.signals[base]);
  const nominal = (source: SpeedSource) => (source === "engineSpeed" ? (perMps ?? 100) : 1);
  const stretches: { run: SpeedRun; stretch: SpeedStretch; from: number; to: number; pull: boolean }[] = [];
  const noise = median(based.map((run) => noiseOf(run, base))) / nominal(base) || 0.01;
  for (const run of based) {
    const channel = run.signals[base];
    if (!channel) continue;
    const series = [
      { times: channel.times, values: channel.values.map((v) => v / nominal(base)), weight: 1 / noise ** 2 },
    ];
    const { pull, coasts } = run.segments;
    if (pull) {
      const tip = tipInS(run.segments);
      stretches.push({
        run,
        stretch: speedStretch(series, tip, pull.to_s, 0.1, tip),
        from: tip + 0.6,
        to: pull.to_s - 0.05,
        pull: true,
      });
    }
    for (const coast of coasts) {
      stretches.push({
        run,
        stretch: speedStretch(series, coast.from_s, coast.to_s, 0.5, null),
        from: coast.from_s + 0.3,
        to: coast.to_s - 0.3,
        pull: false,
      });
    }
  }
  const rate = median(based.map((run) => run.signals[base]?.rateHz ?? 10));
  const floor = Math.max(0.1, 1.2 / rate);
  const lagOf = (source: SpeedSource) =>
    earlier?.base === base ? (earlier.channels.get(source)?.lagS ?? 0) : 0;
  const equations: Equation[] = [];
  for (const kind of [true, false]) {
    const some = stretches.filter((s) => s.pull === kind);
    if (some.length === 0) continue;
    const smoothing = chooseSmoothing(
      some.map((s) => s.stretch),
      kind ? floor : 3 * floor,
    );
    for (const { run, stretch, from, to } of some) {
      gather(equations, run, smoothSpeed(stretch, smoothing), from, to, kind, base, forceN, masked, lagOf);
    }
  }
  for (const run of based) cruiseEquations(equations, run, base, nominal(base), forceN);
  return solveModel(equations, base, nominal, noise, lagOf);
}

function mostCommon(has: (source: SpeedSource) => number): SpeedSource {
  return SPEED_SOURCES.reduce((best, source) => (has(source) > has(best) ? source : best));
}

function noiseOf(run: SpeedRun, source: SpeedSource): number {
  const channel = run.signals[source];
  const span = run.segments.pull ?? run.segments.coast;
  return channel && span ? channelNoise(channel, span.from_s, span.to_s) : Number.NaN;
}

function gather(
  equations: Equation[],
  run: SpeedRun,
  fit: SplineFit,
  from: number,
  to: number,
  pull: boolean,
  base: SpeedSource,
  forceN: ForceModel,
  masked: (run: SpeedRun, t: number) => boolean,
  lagOf: (source: SpeedSource) => number,
): void {
  const scratch = new Float64Array(4);
  for (const source of SPEED_SOURCES) {
    const channel = run.signals[source];
    if (!channel || source === base || (!pull && source === "engineSpeed")) continue;
    const lag = lagOf(source);
    const [a, b] = between(channel, from + lag, to + lag);
    const step = pull ? 1 : Math.max(1, Math.ceil((b - a) / MOST_COAST_SAMPLES));
    for (let i = a; i < b; i += step) {
      const t = channel.times[i] - lag;
      if (pull && slips(source) && masked(run, t)) continue;
      const speed = splineAt(fit.basis, fit.coefficients, t, 0, scratch);
      const acceleration = splineAt(fit.basis, fit.coefficients, t, 1, scratch);
      equations.push({
        source,
        value: channel.values[i],
        speed,
        acceleration,
        forceN: pull ? forceN(run, speed, acceleration, t) : 0,
      });
    }
  }
}

/** Steady driving in gear: one equation a channel, weighted by repetition of its mean. */
function cruiseEquations(
  equations: Equation[],
  run: SpeedRun,
  base: SpeedSource,
  nominal: number,
  forceN: ForceModel,
): void {
  const { cruise } = run.segments;
  const reference = run.signals[base];
  if (!cruise || !reference) return;
  const [a, b] = between(reference, cruise.from_s, cruise.to_s);
  if (b - a < 3) return;
  const speed = reference.values.subarray(a, b).reduce((sum, v) => sum + v, 0) / (b - a) / nominal;
  for (const source of SPEED_SOURCES) {
    const channel = run.signals[source];
    if (!channel || source === base) continue;
    const [c, d] = between(channel, cruise.from_s, cruise.to_s);
    for (let i = c; i < d; i++) {
      equations.push({
        source,
        value: channel.values[i],
        speed,
        acceleration: 0,
        forceN: forceN(run, speed, 0, channel.times[i]),
      });
    }
  }
}

/** Unknowns: per channel scale and scale·lag, and one slip shared by the driven channels (as scale-free product). */
function solveModel(
  equations: readonly Equation[],
  base: SpeedSource,
  nominal: (source: SpeedSource) => number,
  noise: number,
  lagOf: (source: SpeedSource) => number,
): SpeedModel {
  const others = SPEED_SOURCES.filter((source) => equations.some((e) => e.source === source));
  const index = new Map(others.map((source, k) => [source, 1 + 2 * k]));
  const size = 1 + 2 * others.length;
  const deviation = new Map<SpeedSource, number>(others.map((source) => [source, 0.05]));
  let x: Float64Array = new Float64Array(size);
  let solved: NormalSolution | null = null;
  for (let pass = 0; pass < 4; pass++) {
    const normal = normalEquations(size);
    // A driven base slips itself: then only differences of slip between channels could be seen, so it is left at zero.
    const slipSd = slips(base) ? 1e-9 : PRIOR.slipSd;
    addRow(normal, [0], [1e6], slips(base) ? 0 : PRIOR.slipPerN * 1e6, 1 / (slipSd * 1e6) ** 2);
    for (const source of others) {
      const k = index.get(source) ?? 0;
      const sd = source === "engineSpeed" ? PRIOR.engineScaleSd : PRIOR.wheelScaleSd;
      addRow(normal, [k], [1], 1, 1 / sd ** 2);
      addRow(normal, [k + 1], [1], -lagOf(source), 1 / PRIOR.lagSd ** 2);
    }
    for (const e of equations) {
      const k = index.get(e.source) ?? 0;
      const sd = deviation.get(e.source) ?? 0.05;
      const value = e.value / nominal(e.source);
      const slipPart = slips(e.source) ? e.speed * e.forceN * (pass === 0 ? 1 : x[k]) : 0;
      const predicted = x[k] * e.speed - x[k + 1] * e.acceleration + slipPart * x[0];
      const outlier = pass === 0 ? 1 : Math.min(1, (2.5 * sd) / Math.abs(value - predicted));
      addRow(normal, [0, k, k + 1], [slipPart, e.speed, -e.acceleration], value, outlier / sd ** 2);
    }
    solved = solveNormal(normal);
    x = solved.x;
    for (const source of others) {
      const k = index.get(source) ?? 0;
      const residuals: number[] = [];
      for (const e of equations) {
        if (e.source !== source) continue;
        const slipPart = slips(source) ? e.speed * e.forceN * x[k] * x[0] : 0;
        residuals.push(
          Math.abs(e.value / nominal(source) - x[k] * e.speed + x[k + 1] * e.acceleration - slipPart),
        );
      }
      deviation.set(source, Math.max(1e-4, 1.4826 * median(residuals)));
    }
  }
  const final = solved;
  const deviationOf = (k: number) => {
    const unit = new Float64Array(size);
    unit[k] = 1;
    return final ? Math.sqrt(varianceOf(final, unit)) : Number.NaN;
  };
  const gpsIndex = index.get("gps");
  // Road speed = what GPS says: divide every scale by the ratio of GPS to base.
  const road = gpsIndex === undefined ? 1 : x[gpsIndex];
  const channels = new Map<SpeedSource, ChannelModel>();
  const add = (source: SpeedSource, relative: number, sd: number, lagS: number, mps: number) =>
    channels.set(source, {
      source,
      scale: (nominal(source) * relative) / road,
      scaleUncertainty: sd,
      lagS,
      slips: slips(source),
      deviationMps: mps,
    });
  add(base, 1, 0, 0, noise);
  for (const source of others) {
    const k = index.get(source) ?? 0;
    add(
      source,
      x[k],
      deviationOf(k),
      lagOf(source) + x[k + 1] / x[k],
      (deviation.get(source) ?? 0.05) / x[k],
    );
  }
  const scaleFrom =
    base === "gps" || gpsIndex !== undefined ? "gps" : base === "engineSpeed" ? "engine speed" : "wheel";
  const scaleUncertainty = scaleFrom === "gps" ? 0.001 : scaleFrom === "wheel" ? 0.01 : 0.007;
  // Where only driven channels tell the speed, their slip can't be seen: a usual tyre's is taken out.
  const slipPerN = slips(base) ? PRIOR.slipPerN : x[0];
  return { base, slipPerN, channels, scaleUncertainty, scaleFrom };
}
