import type { FactorChoice } from "@/lib/measure/types";
import { randomStream } from "@/lib/signal/random";
import { driveRun } from "@/lib/simulate/drive-run";
import type { RunConditions, SimulatedCar } from "@/lib/simulate/types";

/** What the weather does to torque: reference torque over torque of the day. Formulas written out again, apart from lib/measure. */
export function weatherFactor(
  factor: FactorChoice,
  tempC: number,
  pressureHpa: number,
  rhPct: number,
): number {
  const dry = pressureHpa - (rhPct / 100) * 6.1094 * Math.exp((17.625 * tempC) / (tempC + 243.04));
  const hot = (tempC + 273) / 298;
  if (factor === "ci_turbo_15") return ((990 / dry) ** 0.7 * hot ** 1.5) ** (0.036 * 52 - 1.14);
  return factor === "none" ? 1 : 1.18 * (990 / dry) * Math.sqrt(hot) - 0.18;
}

/** Share by which a revision raises torque: `gainPct` between two engine speeds, with cosine edges 200 1/min wide. */
export function gainBand(scenario: {
  gainPct: number;
  gainFromRpm: number;
  gainToRpm: number;
}): (rpm: number) => number {
  const edge = 200;
  const ramp = (u: number) => (u <= 0 ? 0 : u >= 1 ? 1 : 0.5 - 0.5 * Math.cos(Math.PI * u));
  return (rpm) =>
    (scenario.gainPct / 100) *
    ramp((rpm - scenario.gainFromRpm) / edge + 0.5) *
    ramp((scenario.gainToRpm - rpm) / edge + 0.5);
}

/** Torque of a pull in reference air, no wind, level road, at the engine speeds of `grid`, boost spool included; N·m, null outside. */
export function referenceTorque(
  car: SimulatedCar,
  gain: (rpm: number) => number,
  grid: number[],
  manner: Pick<RunConditions, "ripple" | "pedalRampS">,
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
    ...manner,
  };
  const trace = driveRun(car, still, randomStream(0));
  return grid.map((rpm) => {
    for (let i = 1; i < trace.length; i++) {
      if (trace.t[i] < 1.01 + (manner.pedalRampS ?? 0.12) || trace.rpm[i] < rpm) continue;
      if (trace.rpm[i - 1] > rpm || trace.pedal[i] < 99) return null;
      const u = (rpm - trace.rpm[i - 1]) / (trace.rpm[i] - trace.rpm[i - 1]);
      return trace.torque[i - 1] + u * (trace.torque[i] - trace.torque[i - 1]);
    }
    return null;
  });
}
