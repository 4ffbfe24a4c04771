import type { KnownChannel, LogTable } from "@/lib/logs/types";
import type { RandomStream } from "@/lib/signal/random";

/** Physics of one invented car; formulas as stated with the simulated runs (tests/golden/README.md). */
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
  length: number;
}

const STEP_S = 0.004;
const G = 9.80665;

function interpolate(nodes: readonly [number, number][], x: number): number {
  if (x <= nodes[0][0]) return nodes[0][1];
  for (let i = 1; i < nodes.length; i++) {
    if (x > nodes[i][0]) continue;
    const [x0, y0] = nodes[i - 1];
    const [x1, y1] = nodes[i];
    const slope = (k: number) => {
      const a = nodes[Math.max(0, k - 1)];
      const b = nodes[Math.min(nodes.length - 1, k + 1)];
      return (b[1] - a[1]) / (b[0] - a[0]);
    };
    const h = x1 - x0;
    const u = (x - x0) / h;
    const u2 = u * u;
    const u3 = u2 * u;
    return (
      (2 * u3 - 3 * u2 + 1) * y0 +
      (u3 - 2 * u2 + u) * h * slope(i - 1) +
      (-2 * u3 + 3 * u2) * y1 +
      (u3 - u2) * h * slope(i)
    );
  }
  return nodes[nodes.length - 1][1];
}

/** Drives one run: cruise, full load in one gear to the red line, lift, neutral, coast-down. */
export function driveRun(car: SimulatedCar, run: RunConditions, random: RandomStream): RunTrace {
  const capacity = Math.ceil(240 / STEP_S);
  const make = () => new Float64Array(capacity);
  const out: RunTrace = {
    t: make(),
    v: make(),
    a: make(),
    s: make(),
    rpm: make(),
    torque: make(),
    pedal: make(),
    slip: make(),
    neutral: new Uint8Array(capacity),
    length: 0,
  };
  const e = 6.1094 * Math.exp((17.625 * run.tempC) / (run.tempC + 243.04)) * (run.rhPct / 100);
  const kelvin = run.tempC + 273.15;
  const density = ((run.pressureHpa - e) * 100) / (287.05 * kelvin) + (e * 100) / (461.5 * kelvin);
  const perForce = (car.totalRatio * car.efficiency) / car.radiusM;
  const rpmPerMps = ((car.totalRatio / car.radiusM) * 30) / Math.PI;
  const wheelMass = car.wheelInertiaKgm2 / car.radiusM ** 2;
  const engineMass = (car.efficiency * car.engineInertiaKgm2 * car.totalRatio ** 2) / car.radiusM ** 2;
  let v = car.startRpm / rpmPerMps;
  let s = run.startM;
  let boost = 0;
  let gust = run.gustMps * random.nextNormal();
  let load = 0;
  let neutralRpm = 0;
  let liftAt = Number.POSITIVE_INFINITY;
  let spinFrom: number | null = null;
  for (let i = 0; i < capacity; i++) {
    const t = i * STEP_S;
    const decay = Math.exp(-STEP_S / run.gustTimeS);
    gust = gust * decay + run.gustMps * Math.sqrt(1 - decay * decay) * random.nextNormal();
    const air = v - run.direction * (run.windMps + gust);
    const slope = (run.heightM(s + 0.5) - run.heightM(s - 0.5)) * run.direction;
    const resistance =
      car.rolling * car.massKg * G * (1 + car.rollingV2 * v * v) +
      0.5 * density * car.dragAreaM2 * air * Math.abs(air) +
      (car.drivelineNm + car.drivelineNmPerMps * v) / car.radiusM +
      car.massKg * G * Math.sin(Math.atan(slope));
    const full = t >= run.pedalS && t < liftAt;
    const neutral = t > liftAt + 0.15;
    load = full ? Math.min(1, load + STEP_S / 0.12) : Math.max(0, load - STEP_S / 0.12);
    let torque = 0;
    let rpm = v * rpmPerMps;
    if (!neutral) {
      let available =
        interpolate(car.torque, rpm) * (1 + run.gain(rpm)) * (run.powerFactor / run.weatherFactor);
      if (car.boostLag) {
        const share = Math.min(1, Math.max(0, (rpm - 1800) / 1700));
        const lag = car.boostLag.lowS + (car.boostLag.highS - car.boostLag.lowS) * share;
        boost += full ? ((1 - boost) * STEP_S) / lag : 0;
        available *= car.boostLag.base + (1 - car.boostLag.base) * boost;
      }
      const hold = resistance / perForce;
      torque = t < run.pedalS ? hold : load * available;
    }
    const force = torque * perForce;
    const mass = car.massKg + wheelMass + (neutral ? 0 : engineMass);
    const a = t < run.pedalS ? 0 : (force - resistance) / mass;
    let slip = force / car.slipStiffnessN;
    if (run.spin && full && rpm >= run.spin.atRpm) {
      spinFrom ??= t;
      const u = (t - spinFrom) / run.spin.lengthS;
      if (u < 1) slip += run.spin.slip * Math.sin(Math.PI * u) ** 2;
    }
    rpm *= 1 + slip;
    if (neutral) {
      neutralRpm += ((850 - neutralRpm) * STEP_S) / 0.8;
      rpm = neutralRpm;
    } else neutralRpm = rpm;
    if (rpm >= car.redlineRpm && t < liftAt) liftAt = t;
    out.t[i] = t;
    out.v[i] = v;
    out.a[i] = a;
    out.s[i] = s;
    out.rpm[i] = rpm;
    out.torque[i] = torque;
    out.pedal[i] = t < run.pedalS ? 9 : 100 * load;
    out.slip[i] = neutral ? 0 : slip;
    out.neutral[i] = neutral ? 1 : 0;
    out.length = i + 1;
    s += run.direction * (v * STEP_S + 0.5 * a * STEP_S * STEP_S);
    v += a * STEP_S;
    if (neutral && v < run.coastToMps) break;
  }
  return out;
}

/** Records a driven run the way a logger would: rates, lags, noise, steps. */
export function recordRun(
  trace: RunTrace,
  run: RunConditions,
  sensors: Sensors,
  random: RandomStream,
): LogTable {
  const last = trace.t[trace.length - 1];
  const rows = Math.floor(last * sensors.rateHz);
  const timeS = Float64Array.from({ length: rows }, (_, i) => Math.round((1000 * i) / sensors.rateHz) / 1000);
  const at = (series: Float64Array | Uint8Array, t: number) => {
    const x = Math.min(trace.length - 1, Math.max(0, t / STEP_S));
    const i = Math.min(trace.length - 2, Math.floor(x));
    return series[i] + (x - i) * (series[i + 1] - series[i]);
  };
  const stepped = (x: number, step: number) => (step > 0 ? Math.round(x / step) * step : x);
  const channels: LogTable["channels"] = [];
  const add = (channel: KnownChannel, unit: string, value: (t: number, i: number) => number) => {
    channels.push({ channel, column: channel, unitFound: unit, unit, values: timeS.map(value) });
  };
  const kmh = (mps: number, noise: number, step: number) =>
    stepped(mps * 3.6 + noise * random.nextNormal(), step) / 3.6;
  const { wheelNoiseKmh, wheelStepKmh, wheelScale } = sensors;
  if (sensors.undrivenWheel)
    add("wheel_speed_undriven", "m/s", (t) =>
      kmh(wheelScale * at(trace.v, t - 0.012), wheelNoiseKmh, wheelStepKmh),
    );
  if (sensors.drivenWheel)
    add("wheel_speed_driven", "m/s", (t) =>
      kmh(wheelScale * at(trace.v, t - 0.012) * (1 + at(trace.slip, t - 0.012)), wheelNoiseKmh, wheelStepKmh),
    );
  const fixes = new Map<number, { v: number; s: number; h: number }>();
  let drift = 0;
  const fixAt = (t: number) => {
    const k = Math.floor(t * sensors.gpsHz + 1e-9);
    let fix = fixes.get(k);
    if (!fix) {
      const when = k / sensors.gpsHz;
      const keep = Math.exp(-1 / (sensors.gpsHz * 30));
      drift = drift * keep + 0.5 * Math.sqrt(1 - keep * keep) * random.nextNormal();
      const s = at(trace.s, when);
      fix = {
        v: kmh(at(trace.v, when - sensors.gpsLagS), sensors.gpsNoiseKmh, 0.01),
        s,
        h: Math.round((run.heightM(s) + 120 + drift) * 10) / 10,
      };
      fixes.set(k, fix);
    }
    return fix;
  };
  if (sensors.gps) add("gps_speed", "m/s", (t) => fixAt(t).v);
  if (sensors.engineSpeed)
    add("engine_speed", "1/min", (t) => {
      const since = t - sensors.rpmLagS - run.pedalS;
      const shuffle =
        since > 0 ? sensors.shuffleRpm * Math.exp(-since / 0.18) * Math.sin(2 * Math.PI * 4.5 * since) : 0;
      return stepped(
        at(trace.rpm, t - sensors.rpmLagS) + shuffle + sensors.rpmNoise * random.nextNormal(),
        sensors.rpmStep,
      );
    });
  if (sensors.pedal) add("pedal", "%", (t) => at(trace.pedal, t) + 0.1 * random.nextNormal());
  if (sensors.position) {
    const cos = Math.cos((31.2 * Math.PI) / 180);
    add("latitude", "deg", (t) => -31.2 + (fixAt(t).s * 0.3) / 111_195);
    add("longitude", "deg", (t) => -112.4 + (fixAt(t).s * Math.sqrt(1 - 0.09)) / (111_195 * cos));
    add("altitude", "m", (t) => fixAt(t).h);
  }
  if (sensors.accelerometer)
    add("longitudinal_acceleration", "m/s²", (t) => {
      const s = at(trace.s, t);
      const slope = (run.heightM(s + 0.5) - run.heightM(s - 0.5)) * run.direction;
      return 0.05 + 1.089 * at(trace.a, t) + G * slope + 0.15 * random.nextNormal();
    });
  return {
    timeS,
    channels,
    encoding: "utf-8",
    delimiter: ",",
    decimal: ".",
    rowsRead: rows,
    rowsRefused: [],
    time: { column: "time", form: "s", from: "0", toS: timeS[rows - 1], rateHz: sensors.rateHz, gaps: [] },
    leftOut: [],
    problems: [],
  };
}
