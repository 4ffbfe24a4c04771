import type { KnownChannel, LogTable } from "@/lib/logs/types";
import { type RandomStream, randomStream } from "@/lib/signal/random";

const STEP_S = 0.001;
const GRAVITY = 9.80665;

/** What a simulated sprint varies; the physics is a balance of forces with traction limit, gears and shifts. */
export interface SprintScenario {
  massKg: number;
  powerW: number;
  /** Drive force never exceeds this share of the weight. */
  grip: number;
  shiftS: number;
  /** How the drive force comes in after first motion, and how long that takes. */
  ramp: "even" | "soft" | "exponential";
  rampS: number;
  /** Rise over run in the direction driven. */
  slope: number;
  standS: number;
  rateHz: number;
  wheel: boolean;
  wheelStepKmh: number;
  wheelScale: number;
  gpsHz: number;
  gpsScale: number;
  accelerometer: boolean;
  /** What the accelerometer reads of acceleration, through pitch, and the time constant of its filter. */
  pitchGain: number;
  filterS: number;
  toMps: number;
}

const BASE: SprintScenario = {
  massKg: 1500,
  powerW: 160_000,
  grip: 0.5,
  shiftS: 0.3,
  ramp: "even",
  rampS: 0.17,
  slope: 0,
  standS: 2.5,
  rateHz: 50,
  wheel: true,
  wheelStepKmh: 0.01,
  wheelScale: 1,
  gpsHz: 10,
  gpsScale: 1,
  accelerometer: true,
  pitchGain: 1.06,
  filterS: 0.01,
  toMps: 57,
};

/** A scenario of its own for each seed: another car, start, road and shift. */
export function drawnSprint(random: RandomStream, fixed: Partial<SprintScenario> = {}): SprintScenario {
  const between = (low: number, high: number) => low + (high - low) * random.nextUniform();
  const drawn: SprintScenario = {
    ...BASE,
    massKg: between(1100, 2100),
    powerW: between(110_000, 280_000),
    grip: between(0.35, 0.75),
    shiftS: between(0.1, 0.5),
    ramp: (["even", "soft", "exponential"] as const)[Math.floor(between(0, 2.999))],
    rampS: between(0.08, 0.3),
    slope: between(-0.008, 0.008),
    standS: between(2, 3),
    gpsScale: 1 + 0.0005 * random.nextNormal(),
    wheelScale: 1 + 0.01 * random.nextNormal(),
    pitchGain: between(1, 1.1),
    filterS: between(0.002, 0.03),
  };
  return { ...drawn, ...fixed };
}

interface Driven {
  v: Float64Array;
  s: Float64Array;
  a: Float64Array;
  length: number;
}

function rampAt({ ramp, rampS }: SprintScenario, t: number): number {
  const u = t / rampS;
  if (ramp === "exponential") return t <= 0 ? 0 : 1 - Math.exp(-2.5 * u);
  if (u >= 1) return 1;
  return u <= 0 ? 0 : ramp === "even" ? u : u * u * (3 - 2 * u);
}

function drive(scenario: SprintScenario): Driven {
  const { massKg, powerW, grip, shiftS, slope, standS, toMps } = scenario;
  const capacity = 60_000;
  const out: Driven = {
    v: new Float64Array(capacity),
    s: new Float64Array(capacity),
    a: new Float64Array(capacity),
    length: 0,
  };
  // Shifts at these speeds, m/s; in a gear power rises from 70 to 100 % towards its end.
  const shifts = [16, 27, 39, 52];
  let gear = 0;
  let shiftUntil = -1;
  let v = 0;
  let s = 0;
  for (let i = 0; i < capacity; i++) {
    const t = i * STEP_S;
    const from = gear === 0 ? 0 : 0.66 * shifts[gear - 1];
    const to = shifts[gear] ?? 66;
    const share = 0.7 + 0.3 * Math.min(1, Math.max(0, (v - from) / (to - from)));
    const drivenN = Math.min(grip * massKg * GRAVITY, (share * powerW) / Math.max(1, v));
    const ramp = rampAt(scenario, t - standS) * (t < shiftUntil ? 0 : 1);
    const climbN = massKg * GRAVITY * Math.sin(Math.atan(slope));
    const dragN = 0.012 * massKg * GRAVITY + 0.4 * v * v;
    const rampedLoss = t < standS ? 0 : rampAt(scenario, t - standS);
    const a = (ramp * drivenN - (dragN + climbN) * rampedLoss) / (1.05 * massKg);
    out.v[i] = v;
    out.s[i] = s;
    out.a[i] = a;
    out.length = i + 1;
    if (v > toMps || t > 45) break;
    s += v * STEP_S + 0.5 * a * STEP_S * STEP_S;
    v = Math.max(0, v + a * STEP_S);
    if (v >= to && gear < shifts.length) {
      gear++;
      shiftUntil = t + shiftS;
    }
  }
  return out;
}

/** Exact times and speeds of a simulated sprint. Absent: not reached. */
export interface SprintTruth {
  launchS: number;
  /** Time in s from first motion to a speed in m/s, and to a way in m. */
  toSpeedS: (mps: number) => number;
  toWayS: (m: number) => number;
  speedAtWayMps: (m: number) => number;
}

function truthOf({ v, s, length }: Driven, launchS: number): SprintTruth {
  const crossing = (series: Float64Array, level: number) => {
    for (let i = 1; i < length; i++) {
      if (series[i] >= level && series[i - 1] < level) {
        return (i - 1 + (level - series[i - 1]) / (series[i] - series[i - 1])) * STEP_S;
      }
    }
    return Number.NaN;
  };
  return {
    launchS,
    toSpeedS: (mps) => crossing(v, mps) - launchS,
    toWayS: (m) => crossing(s, m) - launchS,
    speedAtWayMps: (m) => v[Math.round(crossing(s, m) / STEP_S)],
  };
}

/** Drives and records one sprint; the same scenario and seed give the same log. */
export function simulateSprint(
  changes: Partial<SprintScenario>,
  seed: number,
): { table: LogTable; truth: SprintTruth } {
  const scenario = { ...BASE, ...changes };
  const random = randomStream(seed, 31);
  const driven = drive(scenario);
  const at = (series: Float64Array, t: number) => {
    const x = Math.min(driven.length - 1, Math.max(0, t / STEP_S));
    const i = Math.min(driven.length - 2, Math.floor(x));
    return series[i] + (x - i) * (series[i + 1] - series[i]);
  };
  const { rateHz, gpsHz, slope, pitchGain } = scenario;
  const rows = Math.floor((driven.length - 1) * STEP_S * rateHz);
  const timeS = Float64Array.from({ length: rows }, (_, i) => Math.round((1000 * i) / rateHz) / 1000);
  const stepped = (x: number, step: number) => Math.round(x / step) * step;
  const channels: LogTable["channels"] = [];
  const add = (channel: KnownChannel, unit: string, value: (t: number) => number) => {
    channels.push({ channel, column: channel, unitFound: unit, unit, values: timeS.map(value) });
  };
  const fixes = new Map<number, { v: number; h: number }>();
  let drift = 0.5 * random.nextNormal();
  const fixAt = (t: number) => {
    const k = Math.floor(t * gpsHz + 1e-9);
    let fix = fixes.get(k);
    if (!fix) {
      const keep = Math.exp(-1 / (gpsHz * 30));
      drift = drift * keep + 0.5 * Math.sqrt(1 - keep * keep) * random.nextNormal();
      const speed = stepped(
        3.6 * scenario.gpsScale * at(driven.v, k / gpsHz - 0.15) + 0.1 * random.nextNormal(),
        0.01,
      );
      fix = {
        v: Math.max(0, speed) / 3.6,
        h: stepped(100 + slope * at(driven.s, k / gpsHz) + drift, 0.1),
      };
      fixes.set(k, fix);
    }
    return fix;
  };
  if (scenario.wheel) {
    add("wheel_speed_undriven", "m/s", (t) => {
      const kmh = scenario.wheelScale * 3.6 * at(driven.v, t - 0.012);
      const read = stepped(kmh + 0.03 * random.nextNormal(), scenario.wheelStepKmh);
      return kmh < 1.5 ? 0 : read / 3.6;
    });
  }
  if (gpsHz > 0) {
    add("gps_speed", "m/s", (t) => fixAt(t).v);
    add("altitude", "m", (t) => fixAt(t).h);
  }
  if (scenario.accelerometer) {
    const filtered = new Float64Array(driven.length);
    const share = 1 - Math.exp(-STEP_S / scenario.filterS);
    for (let i = 1; i < driven.length; i++)
      filtered[i] = filtered[i - 1] + share * (driven.a[i] - filtered[i - 1]);
    add(
      "longitudinal_acceleration",
      "m/s²",
      (t) => 0.05 + pitchGain * at(filtered, t) + GRAVITY * slope + 0.15 * random.nextNormal(),
    );
  }
  const table: LogTable = {
    format: "delimited",
    timeS,
    channels,
    encoding: "utf-8",
    delimiter: ",",
    decimal: ".",
    rowsRead: rows,
    rowsRefused: [],
    time: { column: "time", form: "s", from: "0", toS: timeS[rows - 1], rateHz, gaps: [] },
    leftOut: [],
    problems: [],
  };
  return { table, truth: truthOf(driven, scenario.standS) };
}
