import type { LogTable } from "@/lib/logs/types";
import type { Campaign, FactorChoice } from "@/lib/measure/types";
import { randomStream } from "@/lib/signal/random";
import { driveRun } from "@/lib/simulate/drive-run";
import { recordRun } from "@/lib/simulate/record-run";
import type { RunConditions, Sensors, SimulatedCar } from "@/lib/simulate/types";
import { SIMULATED_CARS } from "./simulated-cars";

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

function weatherFactor(factor: FactorChoice, tempC: number, pressureHpa: number, rhPct: number): number {
  const dry = pressureHpa - (rhPct / 100) * 6.1094 * Math.exp((17.625 * tempC) / (tempC + 243.04));
  const hot = (tempC + 273) / 298;
  if (factor === "ci_turbo_15") return ((990 / dry) ** 0.7 * hot ** 1.5) ** (0.036 * 52 - 1.14);
  return factor === "none" ? 1 : 1.18 * (990 / dry) * Math.sqrt(hot) - 0.18;
}

function band(scenario: Scenario): (rpm: number) => number {
  const edge = 200;
  const ramp = (u: number) => (u <= 0 ? 0 : u >= 1 ? 1 : 0.5 - 0.5 * Math.cos(Math.PI * u));
  return (rpm) =>
    (scenario.gainPct / 100) *
    ramp((rpm - scenario.gainFromRpm) / edge + 0.5) *
    ramp((scenario.gainToRpm - rpm) / edge + 0.5);
}

function referenceTorque(
  car: SimulatedCar,
  gain: (rpm: number) => number,
  grid: number[],
): (number | null)[] {
  const still: RunConditions = {
    direction: 1,
    startM: 0,
    pedalS: 1,
    tempC: 25,
    pressureHpa: 990,
    rhPct: 0,
    windMps: 0,
    gustMps: 0,
    gustTimeS: 3,
    powerFactor: 1,
    gain,
    weatherFactor: 1,
    heightM: () => 0,
    coastToMps: 1e9,
    spin: null,
  };
  const trace = driveRun(car, still, randomStream(0));
  return grid.map((rpm) => {
    for (let i = 1; i < trace.length; i++) {
      if (trace.t[i] < 1.13 || trace.rpm[i] < rpm) continue;
      if (trace.rpm[i - 1] > rpm || trace.pedal[i] < 99) return null;
      const u = (rpm - trace.rpm[i - 1]) / (trace.rpm[i] - trace.rpm[i - 1]);
      return trace.torque[i - 1] + u * (trace.torque[i] - trace.torque[i - 1]);
    }
    return null;
  });
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
  const tilt = 0.001 * random.nextNormal();
  const heightM = (s: number) =>
    tilt * s + waves.reduce((sum, w) => sum + w.height * Math.sin((2 * Math.PI * s) / w.length + w.phase), 0);
  const gain = band(scenario);
  const logs = new Map<string, LogTable>();
  const starts: number[] = [];
  const runs: Campaign["runs"] = [];
  const factors: Record<string, number[]> = { A: [], B: [] };
  const pressureHpa = 1000 + 6 * random.nextNormal();
  [...scenario.order].forEach((side, i) => {
    const id = `r${String(i + 1).padStart(2, "0")}`;
    const direction = scenario.directions[i] === "+" ? 1 : -1;
    const tempC = scenario.tempC + 0.12 * i;
    const rhPct = 55 - 0.3 * i;
    const powerFactor = 1 + scenario.driftPerRun * i + scenario.runSigma * random.nextNormal();
    factors[side].push(powerFactor);
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
    };
    starts.push(run.startM);
    logs.set(id, recordRun(driveRun(model.car, run, random), run, sensors, random));
    runs.push({
      id,
      file: `${id}.csv`,
      kind: "pull",
      side,
      leg: direction === 1 ? "out" : "back",
      order: i + 1,
      gear: model.gear,
      weather: {
        temp_c: Math.round(10 * tempC) / 10,
        pressure_hpa: Math.round(pressureHpa),
        rh_pct: Math.round(rhPct),
      },
    });
  });
  const speedKmh = ((3000 * Math.PI) / 30 / model.car.totalRatio) * model.car.radiusM * 3.6 * 0.9975;
  const campaign: Campaign = {
    campaign: 1,
    vehicle: {
      ...model.vehicle,
      speed_at_rpm: { gear: model.gear, rpm: 3000, speed_kmh: Math.round(10 * speedKmh) / 10 },
      ...(scenario.known && {
        engine_inertia_kgm2: model.car.engineInertiaKgm2,
        wheel_inertia_kgm2: model.car.wheelInertiaKgm2,
        mesh_efficiency: model.car.efficiency,
      }),
    },
    runs,
    compare: { a: "A", b: "B" },
    settings: { factor: model.factor, rpm_step: 50, level: 0.95, seed: 1 },
  };
  const [lo, hi] = [Math.ceil((model.car.startRpm + 300) / 100) * 100, model.car.redlineRpm - 200];
  const rpm = Array.from(
    { length: (hi + 200 - model.car.startRpm) / 50 + 1 },
    (_, i) => model.car.startRpm + 50 * i,
  );
  const a = referenceTorque(model.car, () => 0, rpm);
  const b = referenceTorque(model.car, gain, rpm);
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
