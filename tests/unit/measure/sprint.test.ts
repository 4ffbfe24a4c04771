import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { readLog } from "@/lib/logs/read-log";
import type { LogTable } from "@/lib/logs/types";
import { rollOnTimes } from "@/lib/measure/sprint/roll-on";
import { measureSprint, type SprintResult } from "@/lib/measure/sprint/sprint";
import { expectClose } from "../../support/expect-close";

const golden = (name: string) => readFileSync(new URL(`../../golden/logs/sprints/${name}`, import.meta.url));
/** Truth of the simulated launches: tests/golden/README.md, "logs/sprints". */
const TRUTH = JSON.parse(golden("truth.json").toString("utf8")) as Record<
  string,
  { times_s: Record<string, number>; speed_at_kmh: Record<string, number>; launch_s: number }
>;
const measure = (table: LogTable) => measureSprint(table).result;
const without = (table: LogTable, ...channels: string[]): LogTable => ({
  ...table,
  channels: table.channels.filter((channel) => !channels.includes(channel.channel ?? "")),
});
const fromRest = (name: string) => !name.endsWith(" ivm") && !/^(60|80|100)-/.test(name);

function compare(name: string, got: SprintResult, soundS: number) {
  const truth = TRUTH[name];
  expect(Object.keys(got.times_s).sort()).toEqual(Object.keys(truth.times_s).sort());
  for (const [key, expected] of Object.entries(truth.times_s)) {
    const miss = Math.abs(got.times_s[key] - expected);
    expect(miss, `${key}: ${got.times_s[key]} against ${expected}`).toBeLessThan(
      fromRest(key) ? 0.06 : soundS,
    );
    expect(
      miss / got.times_uncertainty_s[key],
      `${key}: uncertainty ${got.times_uncertainty_s[key]}`,
    ).toBeLessThan(2.5);
  }
  for (const [key, expected] of Object.entries(truth.speed_at_kmh)) {
    expect(Math.abs(got.speed_at_kmh[key] - expected), key).toBeLessThan(0.25);
  }
}

describe("simulated launches of known physics", () => {
  it.each([
    ["a01", "undriven wheel", "front drive, 50 Hz"],
    ["a06", "undriven wheel", "rear drive, 10 Hz"],
    ["a08", "gps", "all-wheel drive: no undriven wheel, GPS 0.15 s late"],
  ])("%s by %s (%s): roll-on and 0.3048 m clocks within 0.025 s", (name, source) => {
    const got = measure(readLog(golden(`${name}.csv.gz`)));
    expect(got.speed_source).toBe(source);
    compare(name, got, 0.025);
    expect(got.notes.map((note) => note.code)).toContain("start_by_accelerometer");
  });
  it("without an accelerometer the start is drawn back, is less certain and says so", () => {
    const table = readLog(golden("a01.csv.gz"));
    const got = measure(without(table, "longitudinal_acceleration"));
    compare("a01", got, 0.025);
    expect(got.notes.map((note) => note.code)).toContain("start_extrapolated");
    expect(got.times_uncertainty_s["0-100"]).toBeGreaterThan(2 * measure(table).times_uncertainty_s["0-100"]);
  });
  it("an undriven wheel that reads 1.2 % high is scaled to GPS and told", () => {
    const table = readLog(golden("a01.csv.gz"));
    for (const channel of table.channels) {
      if (channel.channel === "wheel_speed_undriven") channel.values = channel.values.map((v) => 1.012 * v);
    }
    const got = measure(table);
    compare("a01", got, 0.025);
    expect(got.notes.find((note) => note.code === "wheel_speed_scaled")?.message).toMatch(/1\.[12]\d? %/);
  });
  it("a wheel speed in steps of 1 km/h still gives sound times", () => {
    const table = readLog(golden("a01.csv.gz"));
    for (const channel of table.channels) {
      if (channel.channel === "wheel_speed_undriven")
        channel.values = channel.values.map((v) => Math.round(v * 3.6) / 3.6);
    }
    compare("a01", measure(table), 0.025);
  });
  it("the lag of GPS behind the wheel is found (simulated: 0.15 s and 0.012 s)", () => {
    const note = measure(readLog(golden("a01.csv.gz"))).notes.find((n) => n.code === "gps_latency");
    expectClose(Number(/([\d.]+) s\.$/.exec(note?.message ?? "")?.[1]), 0.138, { abs: 0.01 });
  });
});

/** A table of one speed channel, 50 Hz, which reads nothing below 1.5 km/h. */
function table(speed: (t: number) => number, toS: number): LogTable {
  const timeS = Float64Array.from({ length: Math.round(toS * 50) + 1 }, (_, i) => i / 50);
  const values = timeS.map((t) => {
    const v = Math.round(360 * Math.max(0, speed(t))) / 360;
    return v < 1.5 / 3.6 ? 0 : v;
  });
  return {
    format: "delimited",
    timeS,
    channels: [{ channel: "wheel_speed_undriven", column: "v", unitFound: "km/h", unit: "m/s", values }],
    encoding: "utf-8",
    delimiter: ",",
    decimal: ".",
    rowsRead: timeS.length,
    rowsRefused: [],
    time: { column: "t", form: "s", from: "0", toS, rateHz: 50, gaps: [] },
    leftOut: [],
    problems: [],
  };
}

describe("closed forms", () => {
  it("force minus v²: v = vt tanh(t/τ), way vt τ ln cosh(t/τ), started at 2 s", () => {
    const [vt, tau] = [124.03473458920845, 31.008683647302114];
    const got = measure(table((t) => (t < 2 ? 0 : vt * Math.tanh((t - 2) / tau)), 18));
    // Exact: t = τ artanh(v/vt); for a way, cosh(t/τ) = exp(s/(vt τ)). First motion here is a step of acceleration.
    const atSpeed = (kmh: number) => tau * Math.atanh(kmh / 3.6 / vt);
    const atWay = (m: number) => tau * Math.acosh(Math.exp(m / (vt * tau)));
    expectClose(got.times_s["60-100"], atSpeed(100) - atSpeed(60), { abs: 0.003 });
    expectClose(got.times_s["80-120"], atSpeed(120) - atSpeed(80), { abs: 0.003 });
    expectClose(got.times_s["0-100 ivm"], atSpeed(100) - atWay(0.3048), { abs: 0.03 });
    expectClose(got.times_s["402.336 m ivm"], atWay(402.336) - atWay(0.3048), { abs: 0.03 });
    expectClose(got.times_s["0-100"], atSpeed(100), { abs: 2.5 * got.times_uncertainty_s["0-100"] });
    expectClose(got.speed_at_kmh["402.336 m"], 3.6 * 53.89148190696479, { abs: 0.05 });
    expectClose(got.trap_kmh["402.336 m"], (3.6 * 20.1168) / (atWay(402.336) - atWay(402.336 - 20.1168)), {
      abs: 0.05,
    });
    expect(got.times_s["1000 m"]).toBeUndefined();
  });
  it("a recording that begins in motion has roll-on times only, and says why", () => {
    const got = measure(table((t) => 10 + 3 * t, 12));
    expect(Object.keys(got.times_s)).toEqual(["60-100", "80-120", "100-150"]);
    expectClose(got.times_s["60-100"], 40 / 3.6 / 3, { abs: 0.002 });
    expect(got.notes.map((note) => note.code)).toContain("not_from_rest");
  });
  it("creeping before the start does not count: the last standing start before the top speed does", () => {
    const got = measure(table((t) => (t < 1 ? 0 : t < 2 ? 0.8 : t < 3.5 ? 0 : 4 * (t - 3.5)), 14));
    expectClose(got.segments.sprint?.from_s, 3.5, { abs: 0.15 });
    expectClose(got.times_s["60-100"], 40 / 3.6 / 4, { abs: 0.002 });
  });
  it("roll-on times of a pull: constant acceleration 3 m/s² from 55 km/h", () => {
    const timeS = Float64Array.from({ length: 401 }, (_, i) => 5 + i / 50);
    const got = rollOnTimes(
      timeS,
      timeS.map((t) => 55 / 3.6 + 3 * (t - 5)),
      { deviationMps: 0.03, scale: 0 },
    );
    expect(Object.keys(got.times_s)).toEqual(["60-100", "80-120"]);
    expectClose(got.times_s["80-120"], 40 / 3.6 / 3, { abs: 1e-6 });
    // σ/a at both ends: 0.03/3 · √2.
    expectClose(got.times_uncertainty_s["80-120"], 0.01 * Math.SQRT2, { abs: 1e-5 });
    expect(
      rollOnTimes(new Float64Array(), new Float64Array(), { deviationMps: 0.03, scale: 0 }).times_s,
    ).toEqual({});
  });
});
