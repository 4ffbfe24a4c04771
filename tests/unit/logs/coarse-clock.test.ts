import { describe, expect, it } from "vitest";
import { readLog } from "@/lib/logs/read-log";
import { codesOf } from "@/tests/support/golden-log";

/** A run at `rateHz` from `startS` on, its clock cut down to whole steps; the speed is 20 m/s + 3 m/s² · t. */
function log(
  rateHz: number,
  stepS: number,
  seconds: number,
  written: (t: number, i: number) => number | null,
) {
  const rows: string[] = [];
  for (let i = 0; i < seconds * rateHz; i++) {
    const t = written(0.37 + i / rateHz, i);
    if (t === null) continue;
    rows.push(`${(Math.floor(t / stepS + 1e-9) * stepS).toFixed(2)};${(20 + (3 * i) / rateHz).toFixed(4)}`);
  }
  return readLog(Buffer.from(["Time [s];GPS speed [m/s]", ...rows].join("\n")));
}
const asIs = (t: number) => t;

describe("a clock coarser than the sampling", () => {
  it.each([
    [10, 1],
    [25, 1],
    [20.4, 1],
    [25, 0.1],
    [50, 0.1],
    [100, 0.05],
  ])("%d Hz under a clock of %d s keeps every row, at the rate it was taken", (rateHz, stepS) => {
    const table = log(rateHz, stepS, 30, asIs);
    expect(table.rowsRead).toBe(Math.ceil(30 * rateHz));
    expect(codesOf(table)).toEqual(["times_spread"]);
    const { timeS, channels } = table;
    const n = timeS.length;
    // One sample more or less on the whole is what the ticks leave open.
    expect(Math.abs((n - 1) / timeS[n - 1] / rateHz - 1)).toBeLessThan(1 / (29 * rateHz));
    const slope = (channels[0].values[n - 1] - channels[0].values[0]) / timeS[n - 1];
    expect(Math.abs(slope / 3 - 1)).toBeLessThan(1 / (29 * rateHz));
  });
  it("a gap stays a gap", () => {
    const table = log(10, 1, 40, (t) => (t > 15 && t < 20 ? null : t));
    expect(table.rowsRead).toBeGreaterThan(340);
    expect(codesOf(table)).toEqual(["times_spread", "gaps"]);
    expect(table.time.gaps).toHaveLength(1);
    expect(table.time.gaps[0].toS - table.time.gaps[0].fromS).toBeCloseTo(5.1, 0);
  });
  it("rows at no steady rate are not spread; that is told", () => {
    const table = log(10, 1, 40, (t, i) =>
      Math.sin(i * i) > 0.1 * Math.sin(i / 30) - 0.3 && i % 40 < 26 ? t : null,
    );
    expect(codesOf(table)).toContain("clock_too_coarse");
    expect(table.rowsRead).toBeLessThanOrEqual(41);
  });
  it("rows written twice stay one sample each", () => {
    const rows = Array.from({ length: 60 }, (_, i) => `${(i >> 1) / 10};${20 + (i >> 1)}`);
    const table = readLog(Buffer.from(["Time [s];GPS speed [m/s]", ...rows].join("\n")));
    expect(table.rowsRead).toBe(30);
    expect(codesOf(table)).toEqual(["repeated_time"]);
  });
  it("two rows of one time that complete each other become one, none of their cells is lost", () => {
    const rows = Array.from(
      { length: 60 },
      (_, i) => `${(i >> 1) / 10};${i % 2 ? "" : 20 + i};${i % 2 ? 3000 + i : ""}`,
    );
    const table = readLog(Buffer.from(["Time [s];GPS speed [m/s];Engine speed [rpm]", ...rows].join("\n")));
    expect(table.rowsRead).toBe(30);
    expect(table.channels.map(({ values }) => values[4])).toEqual([28, 3009]);
  });
});
