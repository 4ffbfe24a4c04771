import { type MotionTrace, traceAt } from "@/lib/measure/sprint/acceleration";

/** What makes the figures of a speed trace uncertain; standard uncertainties. */
export interface TraceUncertainty {
  /** Of one speed, m/s: noise that is left after smoothing. */
  deviationMps: number;
  /** Of the speed's scale, relative: it moves every speed the same way. */
  scale: number;
}

/** A logger's clock is off by up to 100 in a million; common practice, no source. */
const CLOCK = 1e-4;
/** The acceleration at a crossing is read over this much to each side, s, and not taken below that, m/s². */
const SLOPE_S = 0.15;
const LEAST_ACCELERATION_MPS2 = 0.2;

/** Acceleration around a time, from the speeds 0.15 s to each side, m/s². */
export function accelerationAt(trace: MotionTrace, atS: number): number {
  const from = Math.max(trace.timeS[0], atS - SLOPE_S);
  const to = Math.min(trace.timeS[trace.timeS.length - 1], atS + SLOPE_S);
  return (traceAt(trace, to, "speedMps") - traceAt(trace, from, "speedMps")) / (to - from);
}

/** How one end of a time depends on its inputs: by noise (s) and by the scale of speed (s per unit of scale). */
interface EndUncertainty {
  noiseS: number;
  perScaleS: number;
}

/** Start of a clock that does not hang on a speed or way: only its own uncertainty, s. */
export const clockStart = (noiseS: number): EndUncertainty => ({ noiseS, perScaleS: 0 });

/** Crossing of a speed: σ_t = σ_v/a, and a scale ε moves it by ε·v/a. */
export function speedEnd(trace: MotionTrace, atS: number, of: TraceUncertainty): EndUncertainty {
  const accel = Math.max(LEAST_ACCELERATION_MPS2, accelerationAt(trace, atS));
  return { noiseS: of.deviationMps / accel, perScaleS: traceAt(trace, atS, "speedMps") / accel };
}

/** Crossing of a way: σ_t = σ_s/v, and a scale ε moves it by ε·s/v. `wayDeviationM` = standard uncertainty of the way. */
export function wayEnd(trace: MotionTrace, atS: number, wayM: number, wayDeviationM: number): EndUncertainty {
  const speed = Math.max(0.5, traceAt(trace, atS, "speedMps"));
  return { noiseS: wayDeviationM / speed, perScaleS: wayM / speed };
}

/**
 * Standard uncertainty in s of a time between two ends (GUM, JCGM 100:2008, 5.1 and 5.2: noise and clock independent, the
 * scale common to both ends).
 */
export function timeUncertaintyS(
  from: EndUncertainty,
  to: EndUncertainty,
  durationS: number,
  scale: number,
): number {
  const common = scale * (to.perScaleS - from.perScaleS);
  return Math.hypot(from.noiseS, to.noiseS, common, CLOCK * durationS);
}

/**
 * Standard uncertainty in m/s of the speed at a way from rest: noise, and a scale ε that moves the speed by ε·v and the place
 * where it is read by ε·s, hence ε·(v − a·s/v).
 */
export function speedAtWayUncertaintyMps(
  trace: MotionTrace,
  atS: number,
  wayM: number,
  of: TraceUncertainty,
): number {
  const speed = Math.max(0.5, traceAt(trace, atS, "speedMps"));
  return Math.hypot(of.deviationMps, of.scale * (speed - (accelerationAt(trace, atS) * wayM) / speed));
}
