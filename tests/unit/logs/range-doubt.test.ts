import { describe, expect, it } from "vitest";
import { readLog } from "@/lib/logs/read-log";

/** Problems of a log whose columns run from a low to a high value. */
function doubts(columns: readonly [title: string, low: number, high: number][]): string[] {
  const rows = Array.from({ length: 41 }, (_, i) =>
    [i / 10, ...columns.map(([, low, high]) => (low + ((high - low) * i) / 40).toFixed(3))].join(";"),
  );
  const head = ["Time [s]", ...columns.map(([title]) => title)].join(";");
  return readLog(Buffer.from([head, ...rows].join("\n"))).problems.map(
    ({ code, message }) => `${code}: ${message}`,
  );
}

// What a petrol or diesel engine can show: common practice, no source.
describe("a key that contradicts its own unit about the zero of a pressure", () => {
  it.each([
    ["manifold_pressure", "bar gauge", 1],
    ["manifold_pressure_gauge", "bar abs", 1],
    ["manifold_pressure", "bar abs", 0],
    ["manifold_pressure_gauge", "bar", 0],
  ])("%s in %s: %d doubts", (channel, unit, count) => {
    const rows = Array.from({ length: 40 }, (_, i) => `${i / 10};${(1 + i / 100).toFixed(2)}`);
    const key = { columns: { P: { channel, unit } } };
    const { problems } = readLog(Buffer.from(["Time [s];P", ...rows].join("\n")), { key });
    expect(problems.filter(({ code }) => code === "pressure_reference_disagrees")).toHaveLength(count);
  });
});

describe("a range that no engine has names the doubt", () => {
  it.each([
    [["Lambda", 98, 140], /decimal mark\?/],
    [["Lambda", 11.2, 14.7], /air-fuel ratio/],
    [["Engine speed [rpm]", 80_000, 650_000], /decimal mark\?/],
    [["GPS speed [km/h]", 3500, 14_000], /another unit, or the decimal mark\?/],
    [["Coolant temp [°C]", 140, 205], /in °F\?/],
    [["Coolant temp [°C]", 300, 365], /in K\?/],
    [["MAP [kPa]", 0.3, 2.4], /in bar\?/],
    [["MAP [kPa]", 350, 2400], /in mbar\?/],
    [["Throttle", 0, 1], /fraction instead of per cent/],
    [["Ignition advance [°]", -150, 3000], /implausible_values/],
  ] as const)("%j", (column, words) => {
    expect(doubts([column as unknown as [string, number, number]]).join()).toMatch(words);
  });
  it("two speeds that differ as units do", () => {
    const of = (factor: number) =>
      doubts([
        ["GPS speed [km/h]", 20, 100],
        ["Wheel speed undriven [km/h]", 20 * factor, 100 * factor],
      ]);
    expect(of(1 / 3.6).join()).toMatch(/factor of 3\.60, as km\/h and m\/s do/);
    expect(of(1.609344).join()).toMatch(/as mph and km\/h do/);
    // 12 % of slip is no unit.
    expect(of(1.12)).toEqual([]);
  });
  it("a temperature without a unit is asked for, not guessed", () => {
    expect(doubts([["Coolant temp", 140, 205]]).join()).toMatch(/^unit_unknown/);
  });
  it("a usual run has none", () => {
    expect(
      doubts([
        ["GPS speed [km/h]", 20, 240],
        ["Lambda", 0.78, 1.1],
        ["MAP [kPa]", 30, 250],
        ["Coolant temp [°C]", 20, 105],
        ["Throttle [%]", 0, 100],
        ["Engine speed", 900, 7200],
        ["Ignition advance", -5, 42],
      ]),
    ).toEqual([]);
  });
});
