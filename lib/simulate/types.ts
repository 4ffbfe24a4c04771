/** Physics of one invented car; the balance of forces of lib/measure, solved the other way round. */
export interface SimulatedCar {
  massKg: number;
  radiusM: number;
  totalRatio: number;
  efficiency: number;
  engineInertiaKgm2: number;
  wheelInertiaKgm2: number;
  rolling: number;
  rollingV2: number;
  dragAreaM2: number;
  drivelineNm: number;
  drivelineNmPerMps: number;
  slipStiffnessN: number;
  startRpm: number;
  redlineRpm: number;
  boostLag: { lowS: number; highS: number; base: number } | null;
  /** [rpm, N·m] nodes of the steady full-load torque. */
  torque: [number, number][];
}

export interface Sensors {
  rateHz: number;
  undrivenWheel: boolean;
  drivenWheel: boolean;
  gps: boolean;
  engineSpeed: boolean;
  pedal: boolean;
  position: boolean;
  accelerometer: boolean;
  wheelStepKmh: number;
  wheelNoiseKmh: number;
  wheelScale: number;
  gpsHz: number;
  gpsNoiseKmh: number;
  gpsLagS: number;
  rpmStep: number;
  rpmNoise: number;
  rpmLagS: number;
  shuffleRpm: number;
}

/** One thing the driver does after the pull, until a speed or for a time. "clutch": gear stays in, clutch open; "hold": part load. */
export interface AfterPull {
  what: "neutral" | "clutch" | "overrun" | "brake" | "hold";
  toMps?: number;
  seconds?: number;
}

export interface RunConditions {
  direction: 1 | -1;
  /** Strip position at the start of the log, m. */
  startM: number;
  pedalS: number;
  tempC: number;
  pressureHpa: number;
  rhPct: number;
  windMps: number;
  gustMps: number;
  gustTimeS: number;
  powerFactor: number;
  /** Fraction by which the revision raises torque at an engine speed. */
  gain: (rpm: number) => number;
  weatherFactor: number;
  heightM: (s: number) => number;
  coastToMps: number;
  spin: { atRpm: number; slip: number; lengthS: number } | null;
  /** Absent: neutral, rolling down to `coastToMps`. */
  after?: readonly AfterPull[];
  /** How long the pedal takes to go down; 0.12 s when absent. */
  pedalRampS?: number;
  /** Full load in a lower gear (its ratio over the pull's) up to the pull's first speed, then a shift; `pedalS` counts from there. */
  approachRatio?: number;
  /** Share by which torque waves with engine speed (period 350 1/min), as a tuned intake makes it. */
  ripple?: number;
}

export interface RunTrace {
  t: Float64Array;
  v: Float64Array;
  a: Float64Array;
  s: Float64Array;
  rpm: Float64Array;
  torque: Float64Array;
  pedal: Float64Array;
  slip: Float64Array;
  neutral: Uint8Array;
  /** Gear in the box: 0 none, 1 the pull's, 2 the one of the approach. */
  engaged: Uint8Array;
  /** When the pedal goes down for the pull, s. */
  pedalS: number;
  length: number;
}

/** Step of the integration, s. */
export const STEP_S = 0.004;
