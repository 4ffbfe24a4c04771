import type { PullSpeed } from "@/lib/measure/speed/pull-speed";
import { splineAt } from "@/lib/signal/penalised-spline";
import { RPM_RADPS } from "@/lib/units/constants";

/** What turns motion into torque: masses in kg, gearing in rad of the crankshaft per metre of road. */
export interface Driveline {
  massKg: number;
  wheelMassKg: number;
  engineInertiaKgm2: number;
  meshEfficiency: number;
  gearingRadPerM: number;
}

/** A pull point by point. */
export interface PullPoints {
  t: Float64Array;
  speedMps: Float64Array;
  accelerationMps2: Float64Array;
  rpm: Float64Array;
  /** Force at the road, N: what accelerates the car and what resists it. */
  tractiveN: Float64Array;
  /** Tractive force plus what the wheels' own inertia takes, N. */
  wheelN: Float64Array;
  engineNm: Float64Array;
}

const STEP_S = 0.01;

/**
 * Torque along a pull: wheel force = (m + ΣJw/r²)·a + resistance; crank torque = wheel force / (gearing · η) + Je·gearing·a.
 * Engine speed = gearing · v · (1 + slip · force). Points lie 10 ms apart, from `fromS` to `toS`.
 */
export function pullPoints(
  pull: PullSpeed,
  fromS: number,
  toS: number,
  driveline: Driveline,
  slipPerN: number,
  resistanceN: (speedMps: number, t: number) => number,
): PullPoints {
  const count = Math.max(0, Math.floor((toS - fromS) / STEP_S) + 1);
  const make = () => new Float64Array(count);
  const out: PullPoints = {
    t: make(),
    speedMps: make(),
    accelerationMps2: make(),
    rpm: make(),
    tractiveN: make(),
    wheelN: make(),
    engineNm: make(),
  };
  const scratch = new Float64Array(4);
  const { basis, coefficients } = pull.fit;
  for (let i = 0; i < count; i++) {
    const t = fromS + i * STEP_S;
    const v = splineAt(basis, coefficients, t, 0, scratch);
    const a = splineAt(basis, coefficients, t, 1, scratch);
    const tractive = driveline.massKg * a + resistanceN(v, t);
    const wheel = tractive + driveline.wheelMassKg * a;
    const engineSideN =
      wheel + driveline.meshEfficiency * driveline.engineInertiaKgm2 * driveline.gearingRadPerM ** 2 * a;
    out.t[i] = t;
    out.speedMps[i] = v;
    out.accelerationMps2[i] = a;
    out.tractiveN[i] = tractive;
    out.wheelN[i] = wheel;
    out.engineNm[i] = engineSideN / (driveline.gearingRadPerM * driveline.meshEfficiency);
    out.rpm[i] = (driveline.gearingRadPerM * v * (1 + slipPerN * engineSideN)) / RPM_RADPS;
  }
  return out;
}

/** The points of a pull on a fixed engine-speed grid; null outside the pull and inside masked spans. */
export interface GridCurve {
  rpm: number[];
  timeS: (number | null)[];
  speedMps: (number | null)[];
  accelerationMps2: (number | null)[];
  tractiveKw: (number | null)[];
  wheelKw: (number | null)[];
  engineNm: (number | null)[];
}

/** Interpolates a pull onto multiples of `stepRpm`. Engine speed is made to rise; a point inside a mask is null. */
export function gridCurve(points: PullPoints, stepRpm: number, masked: (t: number) => boolean): GridCurve {
  const out: GridCurve = {
    rpm: [],
    timeS: [],
    speedMps: [],
    accelerationMps2: [],
    tractiveKw: [],
    wheelKw: [],
    engineNm: [],
  };
  const n = points.t.length;
  if (n < 2) return out;
  const low = Math.ceil(points.rpm[0] / stepRpm);
  const high = Math.floor(points.rpm.reduce((top, rpm) => Math.max(top, rpm), 0) / stepRpm);
  let i = 1;
  for (let k = low; k <= high; k++) {
    const rpm = k * stepRpm;
    while (i < n && points.rpm[i] < rpm) i++;
    if (i >= n) break;
    const u = Math.min(1, Math.max(0, (rpm - points.rpm[i - 1]) / (points.rpm[i] - points.rpm[i - 1] || 1)));
    const at = (series: Float64Array) => series[i - 1] + u * (series[i] - series[i - 1]);
    const hidden = masked(at(points.t));
    const value = (x: number) => (hidden ? null : x);
    out.rpm.push(rpm);
    out.timeS.push(value(at(points.t)));
    out.speedMps.push(value(at(points.speedMps)));
    out.accelerationMps2.push(value(at(points.accelerationMps2)));
    out.tractiveKw.push(value((at(points.tractiveN) * at(points.speedMps)) / 1000));
    out.wheelKw.push(value((at(points.wheelN) * at(points.speedMps)) / 1000));
    out.engineNm.push(value(at(points.engineNm)));
  }
  return out;
}
