import { HATCH, RECORDER } from "@/db/seed/demo-car";
import { proposeOrder } from "@/lib/compare/plan/order-card";
import type { LogTable } from "@/lib/logs/types";
import { randomStream } from "@/lib/signal/random";
import { driveRun } from "@/lib/simulate/drive-run";
import { type EngineModel, recordEngine } from "@/lib/simulate/record-engine";
import { recordRun } from "@/lib/simulate/record-run";

/** What an image of the demo does: the gain of torque as a fraction by engine speed, and how it runs the engine. */
export interface Effect {
  gain: (rpm: number) => number;
  engine: EngineModel;
}

export interface DemoRun {
  side: "A" | "B";
  leg: "out" | "back";
  /** First = 1. */
  order: number;
  tempC: number;
  pressureHpa: number;
  humidityPct: number;
  csv: Buffer;
}

const COLUMNS: Record<string, { title: string; decimals: number; factor?: number }> = {
  wheel_speed_undriven: { title: "Wheel speed undriven [km/h]", decimals: 2, factor: 3.6 },
  wheel_speed_driven: { title: "Wheel speed driven [km/h]", decimals: 2, factor: 3.6 },
  gps_speed: { title: "GPS speed [km/h]", decimals: 2, factor: 3.6 },
  engine_speed: { title: "Engine speed [rpm]", decimals: 0 },
  pedal: { title: "Pedal position [%]", decimals: 1 },
  latitude: { title: "Latitude [deg]", decimals: 7 },
  longitude: { title: "Longitude [deg]", decimals: 7 },
  altitude: { title: "Altitude [m]", decimals: 1 },
  manifold_pressure: { title: "Manifold pressure absolute [kPa]", decimals: 1 },
  lambda: { title: "Lambda [-]", decimals: 3 },
  knock_retard: { title: "Knock retard [°]", decimals: 1 },
  intake_temperature: { title: "Intake air temperature [°C]", decimals: 1 },
  coolant_temperature: { title: "Coolant temperature [°C]", decimals: 1 },
  exhaust_temperature: { title: "Exhaust gas temperature [°C]", decimals: 0 },
  longitudinal_acceleration: { title: "Longitudinal acceleration [m/s²]", decimals: 3 },
};

/** A simulated recording as the text file that the recorder would write. */
function toCsv({ timeS, channels }: LogTable): Buffer {
  const columns = channels.flatMap(({ channel, values }) => {
    const column = channel === null ? undefined : COLUMNS[channel];
    return column ? [{ ...column, values }] : [];
  });
  const lines = [["Time [s]", ...columns.map((column) => column.title)].join(",")];
  timeS.forEach((time, row) => {
    const cells = columns.map(({ values, factor = 1, decimals }) => (values[row] * factor).toFixed(decimals));
    lines.push([time.toFixed(3), ...cells].join(","));
  });
  return Buffer.from(`${lines.join("\n")}\n`, "utf8");
}

/**
 * One simulated road day in the order that the order card proposes.
 * The strip is level but for a gentle swell; wind, gusts, drift and run-to-run scatter are in it. Same seed, same files.
 */
export function driveRoadDay(args: {
  twinsPerSide: number;
  effectA: Effect;
  effectB: Effect;
  tempC: number;
  /** Size of the gusts, m/s; a sheltered strip where nothing is said. */
  gustMps?: number;
  seed: number;
}): DemoRun[] {
  const random = randomStream(args.seed, 7);
  const engineRandom = randomStream(args.seed, 8);
  const { places } = proposeOrder({ twinsPerSide: args.twinsPerSide });
  const heightM = (s: number) => 0.35 * Math.sin((2 * Math.PI * s) / 1500 + 0.7);
  return places.map(({ side, leg, place }, index) => {
    const tempC = args.tempC + 0.1 * index;
    const effect = side === "A" ? args.effectA : args.effectB;
    const conditions = {
      direction: leg === "out" ? (1 as const) : (-1 as const),
      startM: (leg === "out" ? 80 : 2780) + 20 * random.nextNormal(),
      pedalS: 2 + random.nextUniform(),
      tempC,
      pressureHpa: 1008,
      rhPct: 52,
      windMps: 1.1 + 0.3 * random.nextNormal(),
      gustMps: args.gustMps ?? 0.3,
      gustTimeS: 3,
      powerFactor: 1 - 0.0006 * index + 0.004 * random.nextNormal(),
      gain: effect.gain,
      weatherFactor: 1,
      heightM,
      coastToMps: 15,
      spin: null,
    };
    const trace = driveRun(HATCH, conditions, random);
    const table = recordRun(trace, conditions, RECORDER, random);
    table.channels.push(...recordEngine(trace, conditions, effect.engine, table.timeS, engineRandom));
    return {
      side,
      leg,
      order: place,
      tempC: Math.round(tempC * 10) / 10,
      pressureHpa: 1008,
      humidityPct: 52,
      csv: toCsv(table),
    };
  });
}
