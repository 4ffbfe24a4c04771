import { MPH_MPS, POUND_FORCE_N, STANDARD_GRAVITY_MPS2 } from "@/lib/units/constants";

/** Road load in neutral, F(v) = f0 + f1 v + f2 v²: N, N/(m/s), N/(m/s)². f1 may be negative; nothing is clamped. */
export interface RoadLoad {
  f0N: number;
  f1NPerMps: number;
  f2NPerMps2: number;
}

/** Road load force in N at a speed in m/s. */
export function roadLoadN(load: RoadLoad, speedMps: number): number {
  return load.f0N + load.f1NPerMps * speedMps + load.f2NPerMps2 * speedMps * speedMps;
}

/** Coefficients as fitted in N, N/(km/h), N/(km/h)² (UN GTR 15 units) in SI. */
export function roadLoadFromKmh(f0N: number, f1NPerKmh: number, f2NPerKmh2: number): RoadLoad {
  return { f0N, f1NPerMps: f1NPerKmh * 3.6, f2NPerMps2: f2NPerKmh2 * 12.96 };
}

/** US target coefficients A, B, C (lbf, lbf/mph, lbf/mph²) in SI. */
export function roadLoadFromUs(aLbf: number, bLbfPerMph: number, cLbfPerMph2: number): RoadLoad {
  return {
    f0N: aLbf * POUND_FORCE_N,
    f1NPerMps: (bLbfPerMph * POUND_FORCE_N) / MPH_MPS,
    f2NPerMps2: (cLbfPerMph2 * POUND_FORCE_N) / (MPH_MPS * MPH_MPS),
  };
}

/** The same load against a head wind of `windMps` (negative: tail wind); `airShareN` is the part of f2 that air makes. */
export function roadLoadInWind(
  load: RoadLoad,
  windMps: number,
  airShareN: number = load.f2NPerMps2,
): RoadLoad {
  return {
    f0N: load.f0N + airShareN * windMps * windMps,
    f1NPerMps: load.f1NPerMps + 2 * airShareN * windMps,
    f2NPerMps2: load.f2NPerMps2,
  };
}

/** Force of a slope in N, positive uphill: m g sin(atan grade). `grade` is rise over run (0.01 = 1 %). */
export function gradeForceN(massKg: number, grade: number): number {
  return massKg * STANDARD_GRAVITY_MPS2 * Math.sin(Math.atan(grade));
}

/** What stays of wind after the mean of both directions, in N: k w² (the term 2 k v w cancels). */
export function twoWayWindResidualN(dragKgPerM: number, windMps: number): number {
  return dragKgPerM * windMps * windMps;
}

/**
 * Exact time in s to coast from `fromMps` down to `toMps` with the effective mass `massKg`: ∫ m/F(u) du in closed form
 * (arctangent, logarithm or their limits). NaN when the force is not positive all the way: the car would not get there.
 */
export function coastTimeS(load: RoadLoad, massKg: number, fromMps: number, toMps: number): number {
  const { f0N: f0, f1NPerMps: f1, f2NPerMps2: f2 } = load;
  const bottom = f2 > 0 ? Math.min(fromMps, Math.max(toMps, -f1 / (2 * f2))) : toMps;
  if (Math.min(roadLoadN(load, fromMps), roadLoadN(load, toMps), roadLoadN(load, bottom)) <= 0)
    return Number.NaN;
  if (f2 === 0) {
    if (f1 === 0) return (massKg * (fromMps - toMps)) / f0;
    return (massKg / f1) * Math.log((f0 + f1 * fromMps) / (f0 + f1 * toMps));
  }
  const discriminant = 4 * f0 * f2 - f1 * f1;
  const slope = (v: number) => 2 * f2 * v + f1;
  if (discriminant > 0) {
    const root = Math.sqrt(discriminant);
    return ((2 * massKg) / root) * (Math.atan(slope(fromMps) / root) - Math.atan(slope(toMps) / root));
  }
  if (discriminant === 0) return 2 * massKg * (1 / slope(toMps) - 1 / slope(fromMps));
  const root = Math.sqrt(-discriminant);
  const log = (v: number) => Math.log(Math.abs((slope(v) - root) / (slope(v) + root)));
  return (massKg / root) * (log(fromMps) - log(toMps));
}

/** Mean force in N of a coast over a speed interval: m Δv/Δt. */
export function intervalForceN(massKg: number, deltaMps: number, timeS: number): number {
  return (massKg * deltaMps) / timeS;
}

/** Harmonic mean: the right mean of coast times, since force goes with 1/t (the arithmetic one is biased). */
function harmonicMeanS(timesS: readonly number[]): number {
  return timesS.length / timesS.reduce((sum, t) => sum + 1 / t, 0);
}

/** Both directions of a coast over one interval, averaged harmonically, with their statistical accuracy. */
export interface CoastPairs {
  timeS: number;
  outS: number;
  backS: number;
  pairsS: number[];
  /** Standard deviation of the pair times, s; NaN for one pair. */
  deviationS: number;
  /** p = h s/(√n Δt); NaN for one pair. */
  accuracy: number;
}

/**
 * Averages paired coast times, out and back (equally many). `h` is the two-sided 95 % Student factor for n − 1 degrees
 * of freedom. Source of p: UN GTR 15 (from memory), criterion p ≤ 0.03.
 */
export function averageCoastPairs(outS: readonly number[], backS: readonly number[], h: number): CoastPairs {
  const pairsS = outS.map((t, i) => 2 / (1 / t + 1 / backS[i]));
  const [outMean, backMean] = [harmonicMeanS(outS), harmonicMeanS(backS)];
  const timeS = 2 / (1 / outMean + 1 / backMean);
  const n = pairsS.length;
  const mean = pairsS.reduce((sum, t) => sum + t, 0) / n;
  const deviationS = Math.sqrt(pairsS.reduce((sum, t) => sum + (t - mean) ** 2, 0) / (n - 1));
  return {
    timeS,
    outS: outMean,
    backS: backMean,
    pairsS,
    deviationS,
    accuracy: (h * deviationS) / (Math.sqrt(n) * timeS),
  };
}

/** Conditions of a coast-down for the correction to 20 °C, 100 kPa, no wind and the reference mass. */
export interface CoastConditions {
  tempC: number;
  pressureKpa: number;
  windMps: number;
  /** Mass for which the result shall hold, and mean mass as driven, kg. */
  referenceMassKg: number;
  drivenMassKg: number;
}

/**
 * Corrects a road load to the reference conditions in the style of UN GTR 15 (formula from memory):
 * F* = ((f0 − w1 − K1) + f1 v)(1 + K0 (T − 20)) + K2 f2 v², w1 = f2 w², K1 = f0 (1 − TM/m), K0 = 8.6e-3 /K.
 */
export function correctRoadLoad(load: RoadLoad, at: CoastConditions): RoadLoad {
  const rolling = 1 + 8.6e-3 * (at.tempC - 20);
  const wind = load.f2NPerMps2 * at.windMps * at.windMps;
  const mass = load.f0N * (1 - at.referenceMassKg / at.drivenMassKg);
  const density = ((at.tempC + 273) / 293) * (100 / at.pressureKpa);
  return {
    f0N: (load.f0N - wind - mass) * rolling,
    f1NPerMps: load.f1NPerMps * rolling,
    f2NPerMps2: load.f2NPerMps2 * density,
  };
}

/** Air speed and yaw seen by the vehicle. Source: 40 CFR 1037.528. `angleRad` between wind and travel, 0 = head wind. */
export function apparentAir(
  windMps: number,
  vehicleMps: number,
  angleRad: number,
): { speedMps: number; yawRad: number } {
  const along = vehicleMps + windMps * Math.cos(angleRad);
  const across = windMps * Math.sin(angleRad);
  return { speedMps: Math.hypot(along, across), yawRad: Math.atan2(across, along) };
}

/** Equivalent mass of rotating parts in kg, UN GTR 15 default (from memory): 3 % of mass in running order + 25 kg. */
export function defaultRotatingMassKg(runningOrderKg: number): number {
  return 0.03 * (runningOrderKg + 25);
}

/** Effective mass in kg of a heavy vehicle: 56.7 kg a tyre. Source: 40 CFR 1037.528 example. */
export function heavyEffectiveMassKg(massKg: number, tyres: number): number {
  return massKg + 56.7 * tyres;
}
