import type { KnownChannel, LogTable } from "@/lib/logs/types";
import type { RandomStream } from "@/lib/signal/random";
import { type RunConditions, type RunTrace, STEP_S } from "@/lib/simulate/types";

/** What an image makes of the engine under full load, and what its surroundings do. Temperatures in °C, lags in s. */
export interface EngineModel {
  lambda: (rpm: number) => number;
  /** Manifold pressure, kPa absolute, that the control settles at. */
  boostKpa: (rpm: number) => number;
  /** How far the pressure shoots over before it settles, kPa. */
  overshootKpa: number;
  /** Knock events a second, each taking `knockStepDeg` off the ignition. */
  knocksPerS: (rpm: number) => number;
  knockStepDeg: number;
  exhaustC: (rpm: number) => number;
}

const LAMBDA_LAG_S = 0.15;
const BOOST_LAG_S = 0.35;
/** The overshoot is greatest this long after tip-in, when the pressure is nearly there. */
const OVERSHOOT_S = 1.3;
/** A knock control gives the ignition back at this rate, °/s. */
const KNOCK_RETURN_DEG_PER_S = 1.2;
/** A sheathed thermocouple follows the gas with this lag. */
const EXHAUST_LAG_S = 4;
const INTAKE_LAG_S = 9;
const COOLANT_LAG_S = 60;

/** What is recorded, in the order of the model's state. */
const SENSORS: readonly { channel: KnownChannel; unit: string; step: number; noise: number }[] = [
  { channel: "lambda", unit: "1", step: 0.001, noise: 0.004 },
  { channel: "manifold_pressure", unit: "kPa", step: 0.1, noise: 0.4 },
  { channel: "knock_retard", unit: "°", step: 0.1, noise: 0 },
  { channel: "exhaust_temperature", unit: "°C", step: 1, noise: 1 },
  { channel: "intake_temperature", unit: "°C", step: 0.5, noise: 0 },
  { channel: "coolant_temperature", unit: "°C", step: 0.5, noise: 0 },
];

/**
 * Engine channels of a driven run as a logger records them: first-order lags towards what load and image ask for, sensor noise,
 * sensor steps. A stated simple model for exercising the product, not thermodynamics. One value a row of `timeS`.
 */
export function recordEngine(
  trace: RunTrace,
  run: Pick<RunConditions, "tempC" | "pressureHpa">,
  model: EngineModel,
  timeS: Float64Array,
  random: RandomStream,
): LogTable["channels"] {
  const ambientKpa = run.pressureHpa / 10;
  let lambda = 1;
  let boost = 0.4 * ambientKpa;
  let over = 0;
  let loadedS = 0;
  let retard = 0;
  let exhaust = 480;
  let intake = run.tempC + 11;
  let coolant = 88;
  const rows = SENSORS.map((sensor) => ({ ...sensor, values: new Float64Array(timeS.length) }));
  let row = 0;
  for (let i = 0; i < trace.length && row < timeS.length; i++) {
    const rpm = trace.rpm[i];
    const load = trace.pedal[i] / 100;
    const full = load > 0.9;
    const towards = (value: number, goal: number, lagS: number) => value + ((goal - value) * STEP_S) / lagS;
    lambda = towards(lambda, full ? model.lambda(rpm) : load > 0.02 ? 1 : 1.3, LAMBDA_LAG_S);
    loadedS = full ? loadedS + STEP_S : 0;
    over = full
      ? model.overshootKpa * ((loadedS / OVERSHOOT_S) * Math.exp(1 - loadedS / OVERSHOOT_S)) ** 4
      : 0;
    boost = towards(boost, full ? model.boostKpa(rpm) : (0.3 + 0.5 * load) * ambientKpa, BOOST_LAG_S);
    retard = Math.max(0, retard - KNOCK_RETURN_DEG_PER_S * STEP_S);
    if (full && loadedS > 0.5 && random.nextUniform() < model.knocksPerS(rpm) * STEP_S)
      retard += model.knockStepDeg;
    exhaust = towards(exhaust, full ? model.exhaustC(rpm) : 430, EXHAUST_LAG_S);
    intake = towards(intake, run.tempC + (full ? 34 : 10), INTAKE_LAG_S);
    coolant = towards(coolant, full ? 97 : 88, COOLANT_LAG_S);
    const state = [lambda, boost + over, retard, exhaust, intake, coolant];
    while (row < timeS.length && trace.t[i] >= timeS[row]) {
      rows.forEach(({ step, noise, values }, c) => {
        const value = state[c] + (noise > 0 ? noise * random.nextNormal() : 0);
        values[row] = Math.round(value / step) * step;
      });
      row++;
    }
  }
  for (; row < timeS.length; row++) for (const { values } of rows) values[row] = Number.NaN;
  return rows.map(({ channel, unit, values }) => ({
    channel,
    column: channel,
    unitFound: unit,
    unit,
    values,
  }));
}
