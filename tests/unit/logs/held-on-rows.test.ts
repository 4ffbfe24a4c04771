import { describe, expect, it } from "vitest";
import { readLog } from "@/lib/logs/read-log";
import { heldOnRows } from "@/lib/logs/times/held-on-rows";
import type { LogTable } from "@/lib/logs/types";
import { runSignals } from "@/lib/measure/run/run-signals";
import { columnOf } from "@/tests/support/golden-log";
import { type WrittenChannel, writeMdf } from "@/tests/support/mdf-writer";

const NONE = Number.NaN;

/** An MDF file with one group a signal, each with its own times. */
function recorded(signals: { name: string; unit: string; timeS: number[]; values: number[] }[]): LogTable {
  const time: WrittenChannel = { name: "t", type: 2, sync: 1, dataType: 4, byteOffset: 0, bitCount: 64 };
  const files = signals.map(({ name, unit, timeS, values }) => {
    const stream = new Uint8Array(16 * timeS.length);
    const view = new DataView(stream.buffer);
    for (const [i, t] of timeS.entries()) {
      view.setFloat64(16 * i, t, true);
      view.setFloat64(16 * i + 8, values[i], true);
    }
    const channel = { name, unit, dataType: 4, byteOffset: 8, bitCount: 64 };
    return { groups: [{ channels: [time, channel], dataBytes: 16, cycles: timeS.length }], stream };
  });
  return readLog(writeMdf(files));
}
const every = (stepS: number, count: number, fromS = 0) =>
  Array.from({ length: count }, (_, i) => Math.round((fromS + i * stepS) * 1e6) / 1e6);

describe("channels with times of their own", () => {
  const speedS = every(0.1, 31);
  const slowS = [0.25, 0.75, 1.25, 2.75];
  const log = recorded([
    { name: "GPS speed", unit: "m/s", timeS: speedS, values: speedS.map((t) => 20 + t) },
    { name: "gear", unit: "1", timeS: slowS, values: [2, 3, NONE, 4] },
  ]);

  it("on the rows the newest sample stands until the next, but not before the first nor beyond 2.5 of its steps", () => {
    const gear = columnOf(heldOnRows(log), "gear");
    expect(gear.timeS).toBeUndefined();
    const want = speedS.map((t) => (t < 0.25 ? NONE : t < 0.75 ? 2 : t < 1.25 ? 3 : t < 2.75 ? NONE : 4));
    expect(Array.from(gear.values)).toEqual(want);
    const paused = recorded([
      { name: "GPS speed", unit: "m/s", timeS: speedS, values: speedS },
      { name: "gear", unit: "1", timeS: [0, 0.2, 0.4, 2.4], values: [1, 1, 2, 3] },
    ]);
    const held = columnOf(heldOnRows(paused), "gear").values;
    expect([held[4], held[9], held[10], held[24]]).toEqual([2, 2, NONE, 3]);
  });

  it("a table without such channels is handed back as it is", () => {
    const plain = recorded([{ name: "GPS speed", unit: "m/s", timeS: speedS, values: speedS }]);
    expect(heldOnRows(plain)).toBe(plain);
  });

  it("measuring takes every sample of a slow channel at its own time, not the rows at which it is held", () => {
    const rpmS = every(0.05, 61, 0.013);
    const table = recorded([
      {
        name: "GPS speed",
        unit: "m/s",
        timeS: every(0.01, 301),
        values: every(0.01, 301).map((t) => 20 + t),
      },
      { name: "Engine speed", unit: "1/min", timeS: rpmS, values: rpmS.map((t) => 2000 + 400 * t) },
    ]);
    const { engineSpeed, engineRows, rateHz } = runSignals(table);
    expect(rateHz).toBeCloseTo(100, 6);
    expect(engineSpeed?.rateHz).toBeCloseTo(20, 6);
    expect(Array.from(engineSpeed?.times ?? [])).toEqual(rpmS);
    expect(engineSpeed?.values[10]).toBeCloseTo(2000 + 400 * rpmS[10], 9);
    expect(engineRows?.[100]).toBeCloseTo(2000 + 400 * 0.963, 9);
  });

  it("times of a group that repeats those of the rows are the rows'", () => {
    const same = recorded([
      { name: "GPS speed", unit: "m/s", timeS: speedS, values: speedS },
      { name: "lambda", unit: "1", timeS: speedS, values: speedS },
    ]);
    expect(columnOf(same, "lambda").timeS).toBeUndefined();
  });
});
