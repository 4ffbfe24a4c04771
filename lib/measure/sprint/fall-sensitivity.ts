import { gradeAccelerationMps2, type MotionTrace, traceAt } from "@/lib/measure/sprint/acceleration";
import { accelerationAt } from "@/lib/measure/sprint/timing-uncertainty";
import { lowerBound } from "@/lib/signal/local-quadratic";

/** How a fall along the road acts on a trace. */
export interface FallSensitivity {
  /** Seconds by which a fall of 1 % (over the whole way so far) brings a speed forward that is reached at this time. */
  ofSpeedS: (atS: number) => number;
  /** The same for the way reached at this time. */
  ofWayS: (atS: number) => number;
}

/** A fall of 1 %: what it adds to the acceleration, g·sin(atan 0.01), m/s². */
const PER_PCT_MPS2 = gradeAccelerationMps2(0.01);
/** Below this share of what follows within so many seconds, the drive is interrupted: a shift, or the start coming in. */
const INTERRUPTED = 0.7;
const FOLLOWS_S = 1.2;
const LEAST_ACCELERATION_MPS2 = 0.2;

/**
 * First order in the slope. Where the drive acts, acceleration goes with speed, so each step takes da/a less of its time; while
 * it is interrupted, what the fall adds to the speed is saved at the acceleration that follows. The way gained is the integral
 * of the speed gained. Exact for constant acceleration: t·Δa/a at a speed, half of it at a way.
 */
export function fallSensitivity(trace: MotionTrace): FallSensitivity {
  const { timeS, speedMps } = trace;
  let top = 0;
  for (let i = 1; i < speedMps.length; i++) if (speedMps[i] > speedMps[top]) top = i;
  const own = Float64Array.from({ length: top + 1 }, (_, i) => accelerationAt(trace, timeS[i]));
  const accel = own.map((value, i) => {
    let follows = LEAST_ACCELERATION_MPS2;
    for (let k = i; k <= top && timeS[k] <= timeS[i] + FOLLOWS_S; k++) follows = Math.max(follows, own[k]);
    return value < INTERRUPTED * follows ? follows : value;
  });
  const saved = new Float64Array(top + 1);
  const way = new Float64Array(top + 1);
  for (let i = 1; i <= top; i++) {
    const dt = timeS[i] - timeS[i - 1];
    saved[i] = saved[i - 1] + 0.5 * PER_PCT_MPS2 * dt * (1 / accel[i] + 1 / accel[i - 1]);
    way[i] = way[i - 1] + 0.5 * dt * (accel[i] * saved[i] + accel[i - 1] * saved[i - 1]);
  }
  const at = (series: Float64Array, t: number) => {
    const i = Math.min(top, Math.max(1, lowerBound(timeS, t)));
    const u = (t - timeS[i - 1]) / (timeS[i] - timeS[i - 1]);
    return series[i - 1] + u * (series[i] - series[i - 1]);
  };
  return {
    ofSpeedS: (t) => at(saved, t),
    ofWayS: (t) => at(way, t) / Math.max(0.5, traceAt(trace, t, "speedMps")),
  };
}
