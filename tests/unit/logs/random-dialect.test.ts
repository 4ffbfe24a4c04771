import fc from "fast-check";
import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { FileRefusedError } from "@/lib/errors";
import { readLog } from "@/lib/logs/read-log";
import type { LogTable } from "@/lib/logs/types";
import { goldenLog } from "@/tests/support/golden-log";
import { dialects, type WrittenChannel, writeDialect } from "@/tests/support/write-dialect";

// The simulated run of tests/golden/logs, as papaparse and the language read it: 100 rows out of its pull.
const run = Papa.parse<string[]>(Buffer.from(goldenLog("dialects/d01_comma_bracket_units.csv")).toString(), {
  delimiter: ",",
}).data;
const column = (title: string) => {
  const at = run[0].findIndex((name) => name.startsWith(title));
  return run.slice(120, 220).map((row) => Number(row[at]));
};
const timesMs = column("Time").map((t) => Math.round(1000 * t));
// Units by their definitions: 1 mph = 0.44704 m/s, 1 kn = 1852/3600 m/s, 1 psi = 6.894757 kPa.
const SPEEDS = [
  ["km/h", 3.6, 0, 3],
  ["m/s", 1, 0, 4],
  ["mph", 1 / 0.44704, 0, 3],
  ["kn", 3600 / 1852, 0, 3],
] as const;
const TEMPERATURES = [
  ["°C", 1, 0, 1],
  ["°F", 1.8, 32, 1],
  ["K", 1, 273.15, 2],
] as const;
const CHANNELS: WrittenChannel[] = [
  {
    channel: "wheel_speed_undriven",
    titles: ["Wheel speed undriven", "Radgeschwindigkeit nicht angetrieben", "Vitesse roue non motrice"],
    units: SPEEDS,
    values: column("Wheel speed undriven").map((v) => v / 3.6),
  },
  {
    channel: "gps_speed",
    titles: ["GPS speed", "Geschwindigkeit GPS", "Velocità GPS"],
    units: SPEEDS,
    values: column("GPS speed").map((v) => v / 3.6),
  },
  {
    channel: "engine_speed",
    titles: ["Engine speed", "Motordrehzahl", "Régime moteur"],
    units: [
      ["rpm", 1, 0, 0],
      ["tr/min", 1, 0, 1],
      ["1/s", 1 / 60, 0, 3],
    ],
    values: column("Engine speed"),
  },
  {
    channel: "manifold_pressure",
    titles: ["Manifold pressure", "Saugrohrdruck", "Pression collecteur"],
    units: [
      ["kPa", 1, 0, 1],
      ["bar", 0.01, 0, 3],
      ["mbar", 10, 0, 0],
      ["psi", 1 / 6.894757, 0, 2],
    ],
    values: column("Manifold pressure"),
  },
  { channel: "lambda", titles: ["Lambda"], units: [["-", 1, 0, 3]], values: column("Lambda") },
  {
    channel: "intake_temperature",
    titles: ["Intake air temp", "Ansauglufttemperatur", "Température d'admission"],
    units: TEMPERATURES,
    values: column("Intake air temp"),
  },
];

/** What is wrong with a table read back; empty when nothing is. */
function faults(table: LogTable, stepOf: ReadonlyMap<string, number>): string[] {
  const rowAt = new Map(timesMs.map((t, i) => [Math.round(t - timesMs[0]), i]));
  return CHANNELS.flatMap(({ channel, values }) => {
    const got = table.channels.find((each) => each.channel === channel);
    if (!got) return [`${channel} not found`];
    const half = 0.5001 * (stepOf.get(channel) ?? 0) + 1e-6;
    let compared = 0;
    let worst = 0;
    table.timeS.forEach((t, i) => {
      const row = rowAt.get(Math.round(1000 * t)) ?? -1;
      const off = Math.abs(got.values[i] - values[row]);
      if (Number.isNaN(got.values[i])) return;
      compared++;
      worst = Math.max(worst, Number.isNaN(off) ? Number.POSITIVE_INFINITY : off);
    });
    if (compared < 94) return [`${channel}: ${compared} values`];
    return worst <= half ? [] : [`${channel} off by ${worst}, step ${stepOf.get(channel)}`];
  });
}

describe("one run in dialects drawn at random (property)", { timeout: 120_000 }, () => {
  it("is read back within the places written, or the decimal sign is asked for", () => {
    const outcomes = { read: 0, refused: 0 };
    fc.assert(
      fc.property(dialects(CHANNELS.length), (dialect) => {
        const { bytes, stepOf } = writeDialect(timesMs, CHANNELS, dialect);
        try {
          const table = readLog(bytes);
          expect(faults(table, stepOf)).toEqual([]);
          outcomes.read++;
        } catch (error) {
          if (!(error instanceof FileRefusedError)) throw error;
          expect(error.code).toBe("ambiguous_decimal");
          outcomes.refused++;
        }
      }),
      { numRuns: 400, seed: 11 },
    );
    expect(outcomes.refused).toBeLessThan(0.05 * outcomes.read);
  });
});
