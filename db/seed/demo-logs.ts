import { HATCH, RECORDER } from "@/db/seed/demo-car";
import { proposeOrder } from "@/lib/compare/order-card";
import type { LogTable } from "@/lib/logs/types";
import { randomStream } from "@/lib/signal/random";
import { driveRun } from "@/lib/simulate/drive-run";
import { recordRun } from "@/lib/simulate/record-run";

/** How an image of the demo changes the torque of the car: fraction by engine speed. */
export type Effect = (rpm: number) => number;

/** A smooth hill of a gain or loss over a range of engine speed. */
export function hill(share: number, fromRpm: number, toRpm: number, edgeRpm = 350): Effect {
  const rise = (x: number) => 0.5 * (1 + Math.tanh(x / (edgeRpm / 2)));
  return (rpm) => share * rise(rpm - fromRpm) * rise(toRpm - rpm);
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
  seed: number;
}): DemoRun[] {
  const random = randomStream(args.seed, 7);
  const { places } = proposeOrder({ twinsPerSide: args.twinsPerSide });
  const heightM = (s: number) => 0.35 * Math.sin((2 * Math.PI * s) / 1500 + 0.7);
  return places.map(({ side, leg, place }, index) => {
    const tempC = args.tempC + 0.1 * index;
    const conditions = {
      direction: leg === "out" ? (1 as const) : (-1 as const),
      startM: (leg === "out" ? 80 : 2780) + 20 * random.nextNormal(),
      pedalS: 2 + random.nextUniform(),
      tempC,
      pressureHpa: 1008,
      rhPct: 52,
      windMps: 1.1 + 0.3 * random.nextNormal(),
      gustMps: 0.3,
      gustTimeS: 3,
      powerFactor: 1 - 0.0006 * index + 0.004 * random.nextNormal(),
      gain: side === "A" ? args.effectA : args.effectB,
      weatherFactor: 1,
      heightM,
      coastToMps: 15,
      spin: null,
    };
    const table = recordRun(driveRun(HATCH, conditions, random), conditions, RECORDER, random);
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
