import type { RandomStream } from "@/lib/signal/random";
import { type RunConditions, type RunTrace, type SimulatedCar, STEP_S } from "@/lib/simulate/types";
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
      car.rolling * car.massKg * STANDARD_GRAVITY_MPS2 * (1 + car.rollingV2 * v * v) +
      0.5 * density * car.dragAreaM2 * air * Math.abs(air) +
      (car.drivelineNm + car.drivelineNmPerMps * v) / car.radiusM +
      car.massKg * STANDARD_GRAVITY_MPS2 * Math.sin(Math.atan(slope));
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
