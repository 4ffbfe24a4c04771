import { FOOT_M, STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

/** Initial vehicle movement in m: 1 ft from rest, where the second clock starts. Source: SAE J1491 (2006-07) 3.3. */
export const INITIAL_MOVEMENT_M = FOOT_M;
/** Length over which trap speed is the mean, in m: 66 ft before the line (common practice, no source). */
const TRAP_LENGTH_M = 66 * FOOT_M;
/** A crossing counts when the speed stays above for this long, in s. */
const STAYS_ABOVE_S = 0.2;

/** A speed trace with its way: equally long, time strictly rising, no NaN. */
export interface MotionTrace {
  timeS: Float64Array;
  speedMps: Float64Array;
  /** Way since the first sample, m. */
  wayM: Float64Array;
}

/** Builds a trace; the way is the exact integral of the speed taken as straight between samples (trapezoids). */
export function motionTrace(timeS: Float64Array, speedMps: Float64Array): MotionTrace {
  const wayM = new Float64Array(timeS.length);
  for (let i = 1; i < timeS.length; i++) {
    wayM[i] = wayM[i - 1] + 0.5 * (speedMps[i] + speedMps[i - 1]) * (timeS[i] - timeS[i - 1]);
  }
  return { timeS, speedMps, wayM };
}

/**
 * First time in s at which the speed rises through `speedMps` and stays above for 0.2 s (or to the end of the trace),
 * linear between samples: error ≤ Δt²|jerk|/(8a). Search starts at `fromS`. Null when it never does.
 */
export function speedCrossingS(trace: MotionTrace, speedMps: number, fromS = -Infinity): number | null {
  const { timeS, speedMps: v } = trace;
  for (let i = 1; i < v.length; i++) {
    if (timeS[i] < fromS || v[i - 1] >= speedMps || v[i] < speedMps) continue;
    const at = timeS[i - 1] + ((speedMps - v[i - 1]) / (v[i] - v[i - 1])) * (timeS[i] - timeS[i - 1]);
    let stays = true;
    for (let j = i; j < v.length && timeS[j] <= at + STAYS_ABOVE_S; j++) if (v[j] < speedMps) stays = false;
    if (stays) return at;
  }
  return null;
}

/** Time in s at which the way reaches `wayM`, with the speed straight between samples; null beyond the trace. */
export function wayCrossingS(trace: MotionTrace, wayM: number): number | null {
  const { timeS, speedMps: v, wayM: s } = trace;
  let i = 1;
  while (i < s.length && s[i] < wayM) i++;
  if (i >= s.length) return null;
  const step = timeS[i] - timeS[i - 1];
  const accel = (v[i] - v[i - 1]) / step;
  const left = wayM - s[i - 1];
  if (left <= 0) return timeS[i - 1];
  // Root of v₀ t + a t²/2 = left in the form that does not cancel.
  return (
    timeS[i - 1] + (2 * left) / (v[i - 1] + Math.sqrt(Math.max(0, v[i - 1] * v[i - 1] + 2 * accel * left)))
  );
}

/** Value of a trace column at a time inside the trace, straight between samples. */
export function traceAt(trace: MotionTrace, atS: number, column: "speedMps" | "wayM"): number {
  const { timeS } = trace;
  let low = 0;
  let high = timeS.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (timeS[middle] <= atS) low = middle;
    else high = middle;
  }
  const step = timeS[high] - timeS[low];
  const share = (atS - timeS[low]) / step;
  const speed = trace.speedMps[low] + share * (trace.speedMps[high] - trace.speedMps[low]);
  if (column === "speedMps") return speed;
  return trace.wayM[low] + 0.5 * (trace.speedMps[low] + speed) * (atS - timeS[low]);
}

/** Mean speed in m/s over the last 20.1168 m before `wayM`; null when the trace does not cover it. */
export function trapSpeedMps(trace: MotionTrace, wayM: number): number | null {
  const from = wayCrossingS(trace, wayM - TRAP_LENGTH_M);
  const to = wayCrossingS(trace, wayM);
  return from === null || to === null ? null : TRAP_LENGTH_M / (to - from);
}

/** Crossing of a level by a cubic through four samples (Lagrange), solved by bisection between the middle two. */
export function cubicCrossingS(timeS: readonly number[], values: readonly number[], level: number): number {
  const at = (t: number) =>
    timeS.reduce((sum, ti, i) => {
      let weight = 1;
      for (let j = 0; j < timeS.length; j++) if (j !== i) weight *= (t - timeS[j]) / (ti - timeS[j]);
      return sum + weight * values[i];
    }, 0);
  let [low, high] = [timeS[1], timeS[2]];
  for (let i = 0; i < 60; i++) {
    const middle = 0.5 * (low + high);
    if (at(middle) < level) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

/** Standard uncertainty in s of a crossing time from the one of the speed (m/s) and the acceleration there. */
export function crossingUncertaintyS(speedDeviationMps: number, accelMps2: number): number {
  return speedDeviationMps / accelMps2;
}

/** Acceleration in m/s² that a slope takes (uphill positive): g sin(atan grade), grade = rise over run. */
export function gradeAccelerationMps2(grade: number): number {
  return STANDARD_GRAVITY_MPS2 * Math.sin(Math.atan(grade));
}

/** Change in s of the time from one speed to another at a mean acceleration when a slope acts (uphill positive). */
export function gradeTimeEffectS(fromMps: number, toMps: number, accelMps2: number, grade: number): number {
  const delta = toMps - fromMps;
  return delta / (accelMps2 - gradeAccelerationMps2(grade)) - delta / accelMps2;
}

/** Mean power in W that the kinetic energy alone needs between two speeds: a lower bound of the peak power. */
export function kineticPowerW(massKg: number, fromMps: number, toMps: number, timeS: number): number {
  return (massKg * (toMps * toMps - fromMps * fromMps)) / (2 * timeS);
}
