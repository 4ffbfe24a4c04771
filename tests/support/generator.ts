import type { LogTable } from "@/lib/logs/types";
import type { Campaign } from "@/lib/measure/types";
import { randomStream } from "@/lib/signal/random";
import { driveRun } from "@/lib/simulate/drive-run";
import { recordRun } from "@/lib/simulate/record-run";
import type { AfterPull, RunConditions, Sensors, SimulatedCar } from "@/lib/simulate/types";
import { SIMULATED_CARS } from "./simulated-cars";
import { gainBand, referenceTorque, weatherFactor } from "./simulated-truth";
import { type Logger, worsenLog } from "./worsen-log";

/** What a simulated campaign varies; everything not stated comes from `seed`. */
export interface Scenario {
  car: keyof typeof SIMULATED_CARS;
  order: string;
  /** One of + and − per run; + is out. */
  directions: string;
  gainPct: number;
  gainFromRpm: number;
  gainToRpm: number;
  windMps: number;
  windBetweenRunsMps: number;
  gustMps: number;
  runSigma: number;
  driftPerRun: number;
  undulation: number;
  tempC: number;
  known: boolean;
  spinInRuns: number[];
  coastToMps: number;
  sensors: Partial<Sensors>;
  /** Gear of the pull by the car's sheet; null: the car's usual one. */
  gear: number | null;
  /** Changes of the car's physics that its sheet does not know. */
  physics: Partial<SimulatedCar>;
  /** Rise per metre of the whole strip; null: drawn, about 0.1 %. */
  tilt: number | null;
  /** What a run's driver does after the pull; null: neutral down to `coastToMps`. */
  after: ((run: number) => readonly AfterPull[]) | null;
  pedalRampS: number;
  approachRatio: number | null;
  ripple: number;
  /** Test mass typed over the true one. */
  massTypedOverTrue: number;
  /** How far each run's mass lies above the vehicle's, kg; typed with the run. */
  extraMassKg: ((run: number) => number) | null;
  /** One of + and − per coast-down run without side, driven after the others. */
  coastDowns: string;
  weatherKnown: boolean;
  /** What the logger does beyond the sensors: jitter, dropouts, repeats. */
  logger: Partial<Logger>;
}

const BASE_SCENARIO: Scenario = {
  car: "hatch",
  order: "ABBABAAB",
  directions: "+-+-+-+-",
  gainPct: 0,
  gainFromRpm: 2500,
  gainToRpm: 4500,
  windMps: 1,
  windBetweenRunsMps: 0.4,
  gustMps: 0.4,
  runSigma: 0.006,
  driftPerRun: -0.001,
  undulation: 0.5,
  tempC: 18,
  known: true,
  spinInRuns: [],
  coastToMps: 15,
  sensors: {},
  gear: null,
  physics: {},
  tilt: null,
  after: null,
  pedalRampS: 0.12,
  approachRatio: null,
  ripple: 0,
  massTypedOverTrue: 1,
  extraMassKg: null,
  coastDowns: "",
  weatherKnown: true,
  logger: {},
};

const BASE_SENSORS: Sensors = {
  rateHz: 50,
  undrivenWheel: true,
  drivenWheel: true,
  gps: true,
  engineSpeed: true,
  pedal: true,
  position: true,
  accelerometer: true,
  wheelStepKmh: 0.01,
  wheelNoiseKmh: 0.03,
  wheelScale: 1,
  gpsHz: 10,
  gpsNoiseKmh: 0.1,
  gpsLagS: 0.15,
  rpmStep: 1,
  rpmNoise: 2,
  rpmLagS: 0.03,
  shuffleRpm: 25,
};

export interface SimulatedTruth {
  rpm: number[];
  deltaPct: (number | null)[];
  referenceTorqueNm: Record<string, (number | null)[]>;
  meanPowerFactor: Record<string, number>;
  realisedBiasPct: number;
  evaluateRpm: [number, number];
}

export interface SimulatedCampaign {
  campaign: Campaign;
  logs: Map<string, LogTable>;
  truth: SimulatedTruth;
  /** Height of the strip at a position, m. */
  heightM: (positionM: number) => number;
  /** Where each run's log starts on the strip, m. */
  starts: number[];
}

/** Simulates one campaign with known truth; same scenario and seed, same campaign. */
export function simulateCampaign(changes: Partial<Scenario>, seed: number): SimulatedCampaign {
  const scenario = { ...BASE_SCENARIO, ...changes };
  const sensors = { ...BASE_SENSORS, ...scenario.sensors };
  const model = SIMULATED_CARS[scenario.car];
  const random = randomStream(seed, 77);
  const waves = [
    [1400, 0.4],
    [560, 0.12],
    [230, 0.03],
  ].map(([length, height]) => ({
    length,
    height: 2 * scenario.undulation * height,
    phase: 2 * Math.PI * random.nextUniform(),
  }));
  const drawnTilt = 0.001 * random.nextNormal();
  const tilt = scenario.tilt ?? drawnTilt;
  const heightM = (s: number) =>
    tilt * s + waves.reduce((sum, w) => sum + w.height * Math.sin((2 * Math.PI * s) / w.length + w.phase), 0);
  const gain = gainBand(scenario);
  const gear = scenario.gear ?? model.gear;
  const ratios = model.vehicle.gear_ratios ?? [];
  const car: SimulatedCar = {
    ...model.car,
    totalRatio: (model.car.totalRatio * ratios[gear - 1]) / ratios[model.gear - 1],
    ...scenario.physics,
  };
  const typedMassKg = Math.round(car.massKg * scenario.massTypedOverTrue);
  const logs = new Map<string, LogTable>();
  const starts: number[] = [];
  const runs: Campaign["runs"] = [];
  const factors: Record<string, number[]> = { A: [], B: [] };
  const pressureHpa = 1000 + 6 * random.nextNormal();
  const directions = scenario.directions + scenario.coastDowns;
  [...directions].forEach((sense, i) => {
    const side = scenario.order.at(i) ?? null;
    const id = `r${String(i + 1).padStart(2, "0")}`;
    const direction = sense === "+" ? 1 : -1;
    const tempC = scenario.tempC + 0.12 * i;
    const rhPct = 55 - 0.3 * i;
    const powerFactor = 1 + scenario.driftPerRun * i + scenario.runSigma * random.nextNormal();
    if (side !== null) factors[side].push(powerFactor);
    const extraKg = scenario.extraMassKg?.(i) ?? 0;
    const run: RunConditions = {
      direction,
      startM: direction === 1 ? 60 + 40 * random.nextNormal() : 2780 + 40 * random.nextNormal(),
      pedalS: 2 + random.nextUniform(),
      tempC,
      pressureHpa,
      rhPct,
      windMps: scenario.windMps + scenario.windBetweenRunsMps * random.nextNormal(),
      gustMps: scenario.gustMps,
      gustTimeS: 3,
      powerFactor,
      gain: side === "B" ? gain : () => 0,
      weatherFactor: weatherFactor(model.factor, tempC, pressureHpa, rhPct),
      heightM,
      coastToMps: scenario.coastToMps,
      spin: scenario.spinInRuns.includes(i) ? { atRpm: 2600, slip: 0.08, lengthS: 0.7 } : null,
      after: side === null ? undefined : scenario.after?.(i),
      pedalRampS: scenario.pedalRampS,
      approachRatio: scenario.approachRatio ?? undefined,
      ripple: scenario.ripple,
    };
    starts.push(run.startM);
    const trace = driveRun({ ...car, massKg: car.massKg + extraKg }, run, random);
    const log = recordRun(trace, { ...run, pedalS: trace.pedalS }, sensors, random);
    logs.set(id, worsenLog(log, trace, gear, scenario.logger, randomStream(seed, 500 + i)));
    runs.push({
      id,
      file: `${id}.csv`,
      kind: side === null ? "coast-down" : "pull",
      side,
      leg: direction === 1 ? "out" : "back",
      order: i + 1,
      gear,
      ...(scenario.extraMassKg && { mass_kg: typedMassKg + extraKg }),
      ...(scenario.weatherKnown && {
        weather: {
          temp_c: Math.round(10 * tempC) / 10,
          pressure_hpa: Math.round(pressureHpa),
          rh_pct: Math.round(rhPct),
        },
      }),
    });
  });
  const speedKmh = ((3000 * Math.PI) / 30 / car.totalRatio) * car.radiusM * 3.6 * 0.9975;
  const campaign: Campaign = {
    campaign: 1,
    vehicle: {
      ...model.vehicle,
      mass_kg: typedMassKg,
      speed_at_rpm: { gear, rpm: 3000, speed_kmh: Math.round(10 * speedKmh) / 10 },
      ...(scenario.known && {
        engine_inertia_kgm2: car.engineInertiaKgm2,
        wheel_inertia_kgm2: car.wheelInertiaKgm2,
        mesh_efficiency: car.efficiency,
      }),
    },
    runs,
    compare: { a: "A", b: "B" },
    settings: { factor: model.factor, rpm_step: 50, level: 0.95, seed: 1 },
  };
  const [lo, hi] = [Math.ceil((car.startRpm + 300) / 100) * 100, car.redlineRpm - 200];
  const rpm = Array.from({ length: (hi + 200 - car.startRpm) / 50 + 1 }, (_, i) => car.startRpm + 50 * i);
  const manner = { ripple: scenario.ripple, pedalRampS: scenario.pedalRampS };
  const a = referenceTorque(car, () => 0, rpm, manner);
  const b = referenceTorque(car, gain, rpm, manner);
  const average = (values: number[]) => values.reduce((sum, x) => sum + x, 0) / values.length;
  const meanPowerFactor = { A: average(factors.A), B: average(factors.B) };
  return {
    campaign,
    heightM,
    starts,
    logs,
    truth: {
      rpm,
      deltaPct: a.map((x, i) => {
        const y = b[i];
        return x === null || y === null ? null : 100 * (y / x - 1);
      }),
      referenceTorqueNm: { A: a, B: b },
      meanPowerFactor,
      realisedBiasPct: 100 * (meanPowerFactor.B / meanPowerFactor.A - 1),
      evaluateRpm: [lo, hi],
    },
  };
}
