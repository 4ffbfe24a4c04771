import type { RunSignals, SampledChannel } from "@/lib/measure/run/run-signals";
import { type MotionTrace, motionTrace } from "@/lib/measure/sprint/acceleration";
import { findLaunch, type Launch } from "@/lib/measure/sprint/launch";
import type { TraceUncertainty } from "@/lib/measure/sprint/timing-uncertainty";
import type { Note } from "@/lib/measure/types";
import { crossCorrelationLag } from "@/lib/signal/cross-correlation";
import { localQuadratic, lowerBound } from "@/lib/signal/local-quadratic";
import { median, standardDeviation } from "@/lib/signal/statistics";

/** Speed over time of a sprint on one clock, with what it stands on. */
export interface SprintTrace {
  trace: MotionTrace;
  source: "undriven wheel" | "gps" | "driven wheel";
  /** First motion; null when the run did not begin at rest. */
  launch: Launch | null;
  uncertainty: TraceUncertainty;
  /** Noise of the speed channel as it was logged, m/s. */
  startNoiseMps: number;
  notes: Note[];
}

/** Below this a speed channel counts as standing: wheel sensors see nothing below 1 to 2 km/h. */
const STANDING_MPS = 0.3;
/** A run begins at rest when the car stood this long before. */
const LEAST_STAND_S = 0.3;
/** A speed channel noisier than this is smoothed before crossings are taken. */
const QUIET_MPS = 0.015;
const SMOOTH_S = 0.3;
const FUSE_S = 1;
/** GPS may follow the wheels by as much as this. */
const MAX_LAG_S = 0.5;
const GRID_S = 0.02;
/** A wheel's scale is taken from GPS wherever there is one; it is told from this much on. */
const LEAST_TOLD_SCALE = 0.002;
/** Relative uncertainty of the scale: satellite speed by Doppler, wheel speed by tyre size and wear; common practice, no source. */
const GPS_SCALE = 0.0005;
const WHEEL_SCALE = 0.01;

/** Linear value of a channel at a time inside it. */
function at(channel: SampledChannel, t: number): number {
  const { times, values } = channel;
  const i = Math.min(times.length - 1, Math.max(1, lowerBound(times, t)));
  return values[i - 1] + ((t - times[i - 1]) / (times[i] - times[i - 1])) * (values[i] - values[i - 1]);
}

/** The step in which a channel is written: its smallest change, when nearly all values are whole multiples of it; else 0. */
function writtenStepMps(values: Float64Array): number {
  let step = Number.POSITIVE_INFINITY;
  for (let i = 1; i < values.length; i++) {
    const jump = Math.abs(values[i] - values[i - 1]);
    if (jump > 1e-6 && jump < step) step = jump;
  }
  if (!Number.isFinite(step)) return 0;
  const whole = values.filter((v) => Math.abs(v / step - Math.round(v / step)) < 0.1).length;
  return whole > 0.95 * values.length ? step : 0;
}

/** Noise of a channel while moving: robust second differences, and never less than its written step over √12. */
function noiseMps({ values }: SampledChannel): number {
  const bends: number[] = [];
  for (let i = 1; i < values.length - 1; i++) {
    if (values[i - 1] > 2) bends.push(Math.abs(values[i - 1] - 2 * values[i] + values[i + 1]));
  }
  if (bends.length < 5) return 0.05;
  return Math.max((1.4826 * median(bends)) / Math.sqrt(6), writtenStepMps(values) / Math.sqrt(12));
}

/**
 * How GPS follows the wheel: lag in s by cross-correlation of the speed changes over 0.2 s, and the wheel's scale
 * against GPS (median ratio above 10 m/s) with its uncertainty. Null when they do not overlap well.
 */
function compareWithGps(
  wheel: SampledChannel,
  gps: SampledChannel,
): { lagS: number; scale: number; uncertainty: number } | null {
  const from = Math.max(wheel.times[0], gps.times[0]);
  const to = Math.min(wheel.times[wheel.times.length - 1], gps.times[gps.times.length - 1]);
  const n = Math.floor((to - from) / GRID_S);
  if (n < 100) return null;
  const change = (channel: SampledChannel) =>
    Float64Array.from(
      { length: n - 10 },
      (_, i) => at(channel, from + (i + 10) * GRID_S) - at(channel, from + i * GRID_S),
    );
  const lag = crossCorrelationLag(change(wheel), change(gps), Math.round(MAX_LAG_S / GRID_S));
  if (lag === null) return null;
  const lagS = lag * GRID_S;
  const ratios: number[] = [];
  for (let i = 0; i < gps.times.length; i++) {
    const t = gps.times[i] - lagS;
    if (gps.values[i] > 10 && t > wheel.times[0] && t < wheel.times[wheel.times.length - 1]) {
      ratios.push(at(wheel, t) / gps.values[i]);
    }
  }
  if (ratios.length < 20) return null;
  return {
    lagS,
    scale: median(ratios),
    uncertainty: (1.25 * standardDeviation(ratios)) / Math.sqrt(ratios.length),
  };
}

/** Where the run that reaches the highest speed left its standing start: index of its first sample above the minimum. */
function findStart(channel: SampledChannel): { first: number; restSinceS: number } | null {
  const { times, values } = channel;
  let top = 0;
  for (let i = 1; i < values.length; i++) if (values[i] > values[top]) top = i;
  let first = top;
  while (first > 0 && values[first - 1] >= STANDING_MPS) first--;
  let since = first;
  while (since > 0 && values[since - 1] < STANDING_MPS) since--;
  if (first === 0 || times[first] - times[since] < LEAST_STAND_S) return null;
  return { first, restSinceS: times[since] };
}

/** Speed by integrated acceleration, carried by the slow part of the speed channel: keeps gear changes sharp. */
function fuse(
  channel: SampledChannel,
  acceleration: SampledChannel,
  lagS: number,
  fromS: number,
): SampledChannel | null {
  const a = acceleration;
  const integral = new Float64Array(a.times.length);
  for (let i = 1; i < integral.length; i++) {
    integral[i] = integral[i - 1] + 0.5 * (a.values[i] + a.values[i - 1]) * (a.times[i] - a.times[i - 1]);
  }
  const shifted: SampledChannel = { times: a.times.map((t) => t + lagS), values: integral, rateHz: a.rateHz };
  const rest = channel.values.map((v, i) => v - at(shifted, channel.times[i]));
  const keep = lowerBound(shifted.times, fromS);
  const times = shifted.times.subarray(keep).filter((t) => t <= channel.times[channel.times.length - 1]);
  const values = new Float64Array(times.length);
  for (let i = 0; i < times.length; i++) {
    const slow = localQuadratic(channel.times, rest, times[i], FUSE_S);
    if (slow === null) return null;
    values[i] = at(shifted, times[i]) + slow.value;
  }
  return { times, values, rateHz: a.rateHz };
}

function smooth(channel: SampledChannel): SampledChannel {
  const half = Math.max(SMOOTH_S, 2.5 / channel.rateHz);
  const values = channel.times.map(
    (t, i) => localQuadratic(channel.times, channel.values, t, half)?.value ?? channel.values[i],
  );
  return { ...channel, values };
}

/**
 * Builds the speed trace of a sprint: undriven wheel (scaled to GPS where both are logged), else GPS, else driven wheel.
 * From rest the accelerometer bridges what the sensor does not see. A noisy channel is smoothed: carried by the
 * accelerometer where logged, else by a local quadratic. The log must carry a road speed.
 */
export function sprintTrace(signals: RunSignals): SprintTrace | null {
  const source = signals.undriven ? "undriven wheel" : signals.gps ? "gps" : "driven wheel";
  let channel = signals.undriven ?? signals.gps ?? signals.driven;
  if (!channel) return null;
  const notes: Note[] = [];
  let scaleUncertainty = source === "gps" ? GPS_SCALE : WHEEL_SCALE;
  if (source !== "gps" && signals.gps) {
    const compared = compareWithGps(channel, signals.gps);
    if (compared) {
      notes.push({
        code: "gps_latency",
        message: `GPS speed follows the wheel speed by ${compared.lagS.toFixed(3)} s.`,
      });
      scaleUncertainty = Math.hypot(GPS_SCALE, compared.uncertainty);
      const { scale } = compared;
      if (source === "undriven wheel") {
        channel = { ...channel, values: channel.values.map((v) => v / scale) };
        if (Math.abs(scale - 1) > Math.max(LEAST_TOLD_SCALE, 3 * compared.uncertainty)) {
          notes.push({
            code: "wheel_speed_scaled",
            message: `The wheel speed reads ${(100 * (scale - 1)).toFixed(2)} % against GPS speed and was scaled to it.`,
          });
        }
      }
    }
  }
  if (source === "driven wheel") {
    notes.push({
      code: "driven_wheel_speed",
      message: "Only a driven wheel's speed is logged: wheel slip is in every time.",
    });
  }
  const start = findStart(channel);
  const launch = start
    ? findLaunch(channel, signals.acceleration, channel.times[start.first], start.restSinceS)
    : null;
  const noise = noiseMps(channel);
  const fromS = start ? channel.times[start.first] : channel.times[0];
  let body = channel;
  let deviationMps = noise;
  if (noise > QUIET_MPS) {
    const lagS =
      launch?.by === "acceleration" && signals.acceleration ? lagOf(channel, signals.acceleration) : null;
    const fused =
      lagS !== null && signals.acceleration ? fuse(channel, signals.acceleration, lagS, fromS) : null;
    body = fused ?? smooth(channel);
    const window = fused ? FUSE_S : SMOOTH_S;
    deviationMps = noise * Math.min(1, 1.5 / Math.sqrt(Math.max(1, 2 * window * channel.rateHz * 0.6)));
  }
  const keep = lowerBound(body.times, fromS);
  const times = [...(launch?.timesS ?? []), ...body.times.subarray(keep)];
  const speeds = [...(launch?.speedsMps ?? []), ...body.values.subarray(keep)];
  if (times.length < 5) return null;
  return {
    trace: motionTrace(Float64Array.from(times), Float64Array.from(speeds)),
    source,
    launch,
    uncertainty: { deviationMps, scale: scaleUncertainty },
    startNoiseMps: noise,
    notes,
  };
}

/** Lag of a speed channel behind the accelerometer over the whole run; null when they do not go together. */
function lagOf(channel: SampledChannel, acceleration: SampledChannel): number | null {
  const integral = acceleration.values.slice();
  integral[0] = 0;
  for (let i = 1; i < integral.length; i++) {
    const step = acceleration.times[i] - acceleration.times[i - 1];
    integral[i] = integral[i - 1] + 0.5 * (acceleration.values[i] + acceleration.values[i - 1]) * step;
  }
  return compareWithGps({ ...acceleration, values: integral }, channel)?.lagS ?? null;
}
