import type { RandomStream } from "@/lib/signal/random";
import {
  type AfterPull,
  type RunConditions,
  type RunTrace,
  type SimulatedCar,
  STEP_S,
} from "@/lib/simulate/types";
import { STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

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

/** How long a change of gear takes, engine off the wheels, s. */
const SHIFT_S = 0.4;
/** From lift to what comes next, s. */
const LIFT_S = 0.15;
const BRAKE_MPS2 = 3;
const RIPPLE_PERIOD_RPM = 350;

/** Drag torque of a closed engine, N·m: pumping and friction of about 2 l [common practice, no source]. */
function overrunNm(rpm: number): number {
  return 18 + 0.01 * rpm;
}

/** Drives one run: cruise (or a lower gear before it), full load in one gear to the red line, lift, what follows (neutral coast-down). */
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
    engaged: new Uint8Array(capacity),
    pedalS: run.approachRatio ? Number.POSITIVE_INFINITY : run.pedalS,
    length: 0,
  };
  const e = 6.1094 * Math.exp((17.625 * run.tempC) / (run.tempC + 243.04)) * (run.rhPct / 100);
  const kelvin = run.tempC + 273.15;
  const density = ((run.pressureHpa - e) * 100) / (287.05 * kelvin) + (e * 100) / (461.5 * kelvin);
  const wheelMass = car.wheelInertiaKgm2 / car.radiusM ** 2;
  const firstMps = (car.startRpm * Math.PI * car.radiusM) / (30 * car.totalRatio);
  const after = run.after ?? [{ what: "neutral", toMps: run.coastToMps }];
  const rampS = run.pedalRampS ?? 0.12;
  let v = run.approachRatio ? 0.6 * firstMps : firstMps;
  let s = run.startM;
  let boost = 0;
  let gust = run.gustMps * random.nextNormal();
  let load = 0;
  let freeRpm = 0;
  let shiftAt = Number.POSITIVE_INFINITY;
  let liftAt = Number.POSITIVE_INFINITY;
  let phase = 0;
  let phaseFrom = Number.NaN;
  let spinFrom: number | null = null;
  for (let i = 0; i < capacity; i++) {
    const t = i * STEP_S;
    const approach = run.approachRatio !== undefined && t < shiftAt;
    const shifting = t >= shiftAt && t < shiftAt + SHIFT_S;
    const ended = t > liftAt + LIFT_S;
    if (ended && Number.isNaN(phaseFrom)) phaseFrom = t;
    const now: AfterPull["what"] | null = ended ? after[phase].what : null;
    const neutral = shifting || now === "neutral" || now === "brake" || now === "clutch";
    const ratio = car.totalRatio * (approach ? (run.approachRatio ?? 1) : 1);
    const perForce = (ratio * car.efficiency) / car.radiusM;
    const rpmPerMps = ((ratio / car.radiusM) * 30) / Math.PI;
    const engineMass = (car.efficiency * car.engineInertiaKgm2 * ratio ** 2) / car.radiusM ** 2;
    const decay = Math.exp(-STEP_S / run.gustTimeS);
    gust = gust * decay + run.gustMps * Math.sqrt(1 - decay * decay) * random.nextNormal();
    const air = v - run.direction * (run.windMps + gust);
    const slope = (run.heightM(s + 0.5) - run.heightM(s - 0.5)) * run.direction;
    const resistance =
      car.rolling * car.massKg * STANDARD_GRAVITY_MPS2 * (1 + car.rollingV2 * v * v) +
      0.5 * density * car.dragAreaM2 * air * Math.abs(air) +
      (car.drivelineNm + car.drivelineNmPerMps * v) / car.radiusM +
      car.massKg * STANDARD_GRAVITY_MPS2 * Math.sin(Math.atan(slope));
    const full = approach || (t >= out.pedalS && t < liftAt);
    load = full ? Math.min(1, load + STEP_S / rampS) : Math.max(0, load - STEP_S / 0.12);
    const steady = (!approach && !neutral && t < out.pedalS) || now === "hold";
    let torque = 0;
    let rpm = v * rpmPerMps;
    if (!neutral) {
      let available =
        interpolate(car.torque, rpm) * (1 + run.gain(rpm)) * (run.powerFactor / run.weatherFactor);
      if (run.ripple) available *= 1 + run.ripple * Math.sin((2 * Math.PI * rpm) / RIPPLE_PERIOD_RPM);
      if (car.boostLag) {
        const share = Math.min(1, Math.max(0, (rpm - 1800) / 1700));
        const lag = car.boostLag.lowS + (car.boostLag.highS - car.boostLag.lowS) * share;
        boost = approach ? 0 : boost + (full ? ((1 - boost) * STEP_S) / lag : 0);
        available *= car.boostLag.base + (1 - car.boostLag.base) * boost;
      }
      torque = steady ? resistance / perForce : load * available;
      if (now === "overrun") torque = -overrunNm(rpm);
    }
    // On the overrun power flows from the wheels, so the mesh loss changes sides.
    const force = torque * perForce * (torque < 0 ? car.efficiency ** -2 : 1);
    const mass = car.massKg + wheelMass + (neutral ? 0 : engineMass);
    const a = steady ? 0 : (force - resistance) / mass - (now === "brake" ? BRAKE_MPS2 : 0);
    let slip = force / car.slipStiffnessN;
    if (run.spin && full && rpm >= run.spin.atRpm) {
      spinFrom ??= t;
      const u = (t - spinFrom) / run.spin.lengthS;
      if (u < 1) slip += run.spin.slip * Math.sin(Math.PI * u) ** 2;
    }
    rpm *= 1 + slip;
    if (neutral) {
      freeRpm += ((850 - freeRpm) * STEP_S) / 0.8;
      rpm = freeRpm;
    } else freeRpm = rpm;
    if (approach && v >= firstMps) {
      shiftAt = t;
      out.pedalS = t + SHIFT_S + run.pedalS;
    }
    if (!approach && rpm >= car.redlineRpm && t < liftAt) liftAt = t;
    out.t[i] = t;
    out.v[i] = v;
    out.a[i] = a;
    out.s[i] = s;
    out.rpm[i] = rpm;
    out.torque[i] = torque;
    out.pedal[i] = steady ? 9 : 100 * load;
    out.slip[i] = neutral ? 0 : slip;
    out.neutral[i] = neutral ? 1 : 0;
    out.engaged[i] = approach ? 2 : shifting || now === "neutral" || now === "brake" ? 0 : 1;
    out.length = i + 1;
    s += run.direction * (v * STEP_S + 0.5 * a * STEP_S * STEP_S);
    v += a * STEP_S;
    if (ended) {
      const { toMps, seconds } = after[phase];
      if (v < (toMps ?? 0) || t - phaseFrom >= (seconds ?? Number.POSITIVE_INFINITY)) {
        phase++;
        phaseFrom = t;
      }
      if (phase === after.length) break;
    }
  }
  return out;
}
