import { describe, expect, it } from "vitest";
import { FileRefusedError } from "@/lib/errors";
import type { KnownChannel, LogTable } from "@/lib/logs/types";
import { analyseCampaign, analyseRun } from "@/lib/measure/analyse-campaign";
import { meanCurve } from "@/lib/measure/curve/mean-curve";
import { peakOfCurve } from "@/lib/measure/curve/peak-of-curve";
import { roundResult } from "@/lib/measure/round-result";
import { prepareRun } from "@/lib/measure/run/prepare-run";
import { runSignals, sampledChannel } from "@/lib/measure/run/run-signals";
import { runTraces } from "@/lib/measure/run/run-traces";
import type { CampaignRun, CampaignVehicle } from "@/lib/measure/types";
import { randomStream } from "@/lib/signal/random";
import { simulateCampaign } from "../../support/generator";

const SETTINGS = { factor: "auto" as const, rpm_step: 50, level: 0.95, seed: 1 };

function table(
  columns: Partial<Record<KnownChannel, (t: number) => number>>,
  seconds: number,
  rateHz: number,
): LogTable {
  const timeS = Float64Array.from({ length: Math.round(seconds * rateHz) }, (_, i) => i / rateHz);
  return {
    format: "delimited",
    timeS,
    channels: Object.entries(columns).map(([channel, value]) => ({
      channel: channel as KnownChannel,
      column: channel,
      unitFound: null,
      unit: "1",
      values: timeS.map(value),
    })),
    encoding: "utf-8",
    delimiter: ",",
    decimal: ".",
    rowsRead: timeS.length,
    rowsRefused: [],
    time: { column: "time", form: "s", from: "0", toS: seconds, rateHz, gaps: [] },
    leftOut: [],
    problems: [],
  };
}

const { campaign, logs } = simulateCampaign({ order: "A", directions: "+" }, 9);
const VEHICLE: CampaignVehicle = campaign.vehicle;
const RUN: CampaignRun = campaign.runs[0];

function logOf(id = "r01"): LogTable {
  const log = logs.get(id);
  if (!log) throw new Error(`no log ${id}`);
  return log;
}

/** The simulated log with some channels replaced or left out. */
function changed(
  change: (channel: LogTable["channels"][number], timeS: Float64Array) => LogTable["channels"][number] | null,
): LogTable {
  const log = logOf();
  return { ...log, channels: log.channels.flatMap((channel) => change(channel, log.timeS) ?? []) };
}

const codesOf = (log: LogTable, run = RUN, vehicle = VEHICLE) =>
  prepareRun(run, vehicle, log).reasons.map((reason) => reason.code);

describe("Fresh samples of a column", () => {
  const timeS = Float64Array.from({ length: 500 }, (_, i) => i / 50);
  it("leaves out the repeats of a 10 Hz source in a 50 Hz log", () => {
    const random = randomStream(1);
    let held = 0;
    const values = timeS.map((t, i) => {
      if (i % 5 === 0) held = 10 + 3 * t + 0.05 * random.nextNormal();
      return held;
    });
    const channel = sampledChannel(timeS, values);
    expect(channel?.times.length).toBe(100);
    expect(channel?.rateHz).toBeCloseTo(10, 6);
  });
  it("keeps a coarse step whole: 50 per minute steps at 500 per minute a second", () => {
    const values = timeS.map((t) => 50 * Math.round((2000 + 500 * t) / 50));
    expect(sampledChannel(timeS, values)?.times.length).toBe(500);
  });
  it("leaves gaps out and says null when nothing is left", () => {
    const values = timeS.map((t, i) => (i % 3 === 0 ? Number.NaN : Math.sin(t) * 7.123));
    expect(sampledChannel(timeS, values)?.values.every(Number.isFinite)).toBe(true);
    expect(
      sampledChannel(
        timeS,
        timeS.map(() => Number.NaN),
      ),
    ).toBeNull();
  });
});

describe("First look at a run", () => {
  it("takes the simulated run, with pull, cruise and coast-down", () => {
    const prepared = prepareRun(RUN, VEHICLE, logOf());
    expect(prepared.reasons).toEqual([]);
    expect(prepared.segments?.pull).not.toBeNull();
    expect(prepared.segments?.cruise).not.toBeNull();
    expect(prepared.segments?.coast).not.toBeNull();
  });
  it("says which reason it has", () => {
    const without = (...names: string[]) => changed((c) => (names.includes(c.channel ?? "") ? null : c));
    expect(codesOf(without("wheel_speed_undriven", "wheel_speed_driven", "gps_speed"))).toEqual([
      "no_speed_channel",
    ]);
    expect(
      codesOf(
        changed((c) =>
          c.channel?.includes("speed") && c.channel !== "engine_speed"
            ? { ...c, values: c.values.map(() => 0) }
            : c,
        ),
      ),
    ).toEqual(["speed_all_zero"]);
    expect(
      codesOf(changed((c) => (c.channel === "pedal" ? { ...c, values: c.values.map((v) => v * 0.4) } : c))),
    ).toEqual(["no_full_load"]);
    expect(
      codesOf(without("engine_speed"), RUN, {
        ...VEHICLE,
        speed_at_rpm: null,
        gear_ratios: null,
        tyre: null,
      }),
    ).toEqual(["engine_speed_not_known"]);
    expect(codesOf(logOf(), { ...RUN, kind: "coast-down" })).toEqual([]);
    expect(prepareRun(RUN, VEHICLE, undefined).reasons[0].code).toBe("log_missing");
    expect(prepareRun(RUN, VEHICLE, new FileRefusedError("not_text", "No text.")).reasons).toEqual([
      { code: "not_text", message: "No text." },
    ]);
  });
  it("refuses a pull that ends half way, a log without one, and one that is too slow", () => {
    const log = logOf();
    const lifted = changed((c, timeS) =>
      c.channel === "pedal" ? { ...c, values: c.values.map((v, i) => (timeS[i] > 4.2 ? 0 : v)) } : c,
    );
    expect(codesOf(lifted)).toEqual(["pull_too_short"]);
    const cruise = table({ gps_speed: () => 20, engine_speed: () => 2500 }, 30, 20);
    expect(codesOf(cruise)).toEqual(["no_pull_found"]);
    const keep = Int32Array.from({ length: Math.floor(log.timeS.length / 20) }, (_, i) => 20 * i);
    const slow: LogTable = {
      ...log,
      timeS: Float64Array.from(keep, (i) => log.timeS[i]),
      channels: log.channels.map((c) => ({ ...c, values: Float64Array.from(keep, (i) => c.values[i]) })),
    };
    expect(codesOf(slow)).toEqual(["rate_too_low"]);
  });
  it("notes a cold engine, a gap and a leg that the GPS track contradicts", () => {
    const log = logOf();
    const cold: LogTable = {
      ...log,
      channels: [
        ...log.channels,
        {
          channel: "coolant_temperature",
          column: "ECT",
          unitFound: "°C",
          unit: "°C",
          values: log.timeS.map(() => 45),
        },
      ],
      time: { ...log.time, gaps: [{ fromS: 5, toS: 5.5 }] },
    };
    const codes = (run: CampaignRun) =>
      analyseRun(VEHICLE, run, cold, SETTINGS).notes.map((note) => note.code);
    expect(codes(RUN)).toEqual(expect.arrayContaining(["engine_cold", "gap"]));
    const twin = simulateCampaign({ order: "AA", directions: "+-" }, 4);
    const swapped = twin.campaign.runs.map((run) => ({ ...run, leg: "out" as const }));
    const result = analyseCampaign({ ...twin.campaign, runs: swapped, compare: null }, twin.logs);
    expect(result.runs.flatMap((run) => run.notes.map((note) => note.code))).toContain("leg_disagrees");
  });
});

describe("One run alone", () => {
  it("gives its own curve within 2 % of the true peak, with its own losses", () => {
    const result = analyseRun(VEHICLE, RUN, logOf(), { ...SETTINGS, factor: "none" });
    expect(result.usable).toBe(true);
    expect(result.loss?.source).toBe("run");
    expect(result.factor).toMatchObject({ id: "none", applied: false });
    // Truth of this seed from the simulator's own torque at the reference air; weather and run luck are below 3 %.
    const { truth } = simulateCampaign({ order: "A", directions: "+" }, 9);
    const top = Math.max(
      ...truth.rpm.map((n, k) => ((truth.referenceTorqueNm.A[k] ?? 0) * n * Math.PI) / 30_000),
    );
    expect(Math.abs((result.peak?.engine_kw ?? 0) / top - 1)).toBeLessThan(0.04);
    expect(result.peak?.uncertainty_kw).toBeGreaterThan(0);
  });
  it("keeps tractive, wheel and crank power apart by what turns between them (closed form of the sheet's figures)", () => {
    const { curve, loss } = analyseRun(VEHICLE, RUN, logOf(), SETTINGS);
    if (!curve || !loss) throw new Error("no curve");
    // 63.4 km/h at 3,000 per minute with 1.5 × 3.7 between engine and wheel: the radius; wheels of 4.1 kg·m² weigh J/r².
    const mpsPerRpm = 63.4 / 3.6 / 3000;
    const radiusM = (mpsPerRpm * 30 * 1.5 * 3.7) / Math.PI;
    const wheelMassKg = 4.1 / radiusM ** 2;
    expect(curve.engine_kw.filter((kw) => kw !== null).length).toBeGreaterThan(60);
    curve.rpm.forEach((rpm, k) => {
      const [tractiveKw, wheelKw, engineKw] = [curve.tractive_kw[k], curve.wheel_kw[k], curve.engine_kw[k]];
      if (tractiveKw === null || wheelKw === null || engineKw === null) return;
      const v = rpm * mpsPerRpm;
      const rollingKw = (v * (loss.f0_n + loss.f1_n_per_mps * v + loss.f2_n_per_mps2 * v * v)) / 1000;
      const turningKw = (wheelMassKg / (1420 + wheelMassKg)) * (wheelKw - rollingKw);
      // Wind, slope and slip of the tyre are left out here.
      expect((wheelKw - tractiveKw) / turningKw).toBeGreaterThan(0.92);
      expect((wheelKw - tractiveKw) / turningKw).toBeLessThan(1.08);
      // Mesh efficiency 0.95; the engine's own inertia, 0.16 kg·m² · (3.7 · 1.5 / r)² = 51 kg beside 1,462, and slip come on top.
      expect(engineKw / (wheelKw / 0.95)).toBeGreaterThan(1.02);
      expect(engineKw / (wheelKw / 0.95)).toBeLessThan(1.06);
    });
  });
  it("changes nothing in its input", () => {
    const before = JSON.stringify([...logOf().channels[0].values.subarray(0, 50)]);
    Object.freeze(RUN);
    Object.freeze(VEHICLE);
    analyseRun(VEHICLE, RUN, logOf(), SETTINGS);
    expect(JSON.stringify([...logOf().channels[0].values.subarray(0, 50)])).toBe(before);
  });
  it("uses the mass of the run where it has one: 10 % more mass, about 10 % more of the inertia part", () => {
    const plain = analyseRun(VEHICLE, RUN, logOf(), SETTINGS).peak?.engine_kw ?? 0;
    const heavy =
      analyseRun(VEHICLE, { ...RUN, mass_kg: 1.1 * VEHICLE.mass_kg }, logOf(), SETTINGS).peak?.engine_kw ?? 0;
    expect(heavy / plain).toBeGreaterThan(1.08);
    expect(heavy / plain).toBeLessThan(1.1);
  });
});

describe("Curves", () => {
  it("a mean has no step where a run drops out", () => {
    const full = [100, 100, 100, 100, 100];
    const strong = [110, 110, null, null, null];
    const mean = meanCurve([full, strong]);
    for (const value of mean) expect(value).toBeCloseTo(Math.sqrt(100 * 110), 9);
    expect(
      meanCurve([
        [1, null],
        [1, null],
        [1, 5],
      ])[1],
    ).toBeNull();
    expect(meanCurve([])).toEqual([]);
  });
  it("a run's peak is read from parabolas, not from its highest noise (closed form: 300 − ((n − 3000)/100)²/4)", () => {
    const rpm = Array.from({ length: 61 }, (_, k) => 1500 + 50 * k);
    const torque = rpm.map((n, k) => 300 - ((n - 3000) / 100) ** 2 / 4 + (k === 40 ? 30 : 0));
    expect(peakOfCurve(rpm, torque, false, null)?.engine_nm_rpm).toBe(rpm[40]);
    expect(
      peakOfCurve(
        rpm,
        torque.map((x, k) => (k === 40 ? x - 30 : x)),
        true,
        null,
      )?.engine_nm,
    ).toBeCloseTo(300, 6);
    expect(peakOfCurve(rpm, torque, true, null)?.engine_nm).toBeLessThan(308);
    expect(peakOfCurve([1000, 1050], [1, 2], true, null)).toBeNull();
  });
  it("rounds to seven digits and knows no NaN", () => {
    expect(
      roundResult({ a: 1.23456789, b: [Number.NaN, -0.000123456789], c: undefined, d: "x", e: null }),
    ).toEqual({ a: 1.234568, b: [null, -0.0001234568], d: "x", e: null });
  });
});

describe("Traces for the run page", () => {
  const long = table(
    {
      engine_speed: (t) => (Math.abs(t - 33.3) < 0.01 ? 7000 : 2000 + t),
      latitude: () => 1,
      pedal: (t) => (t < 10 ? Number.NaN : 50),
    },
    100,
    100,
  );
  const traces = runTraces(long, {
    id: "r",
    usable: true,
    reasons: [],
    notes: [{ code: "wheel_spin", from_s: 3, to_s: 4, message: "" }],
    segments: { pull: { from_s: 1, to_s: 9 } },
  });
  it("keeps at most 1 200 points a channel and every extreme", () => {
    expect(traces.timeS.length).toBeLessThanOrEqual(1200);
    expect(traces.timeS.every((t, i) => i === 0 || t > traces.timeS[i - 1])).toBe(true);
    const engine = traces.channels.find((c) => c.channel === "engine_speed");
    expect(engine?.values).toHaveLength(traces.timeS.length);
    expect(Math.max(...(engine?.values ?? []).map((v) => v ?? 0))).toBe(7000);
  });
  it("leaves positions out, gaps are null, segments come along", () => {
    expect(traces.channels.map((c) => c.channel)).toEqual(["engine_speed", "pedal"]);
    expect(traces.channels[1].values[0]).toBeNull();
    expect(traces.segments.pull).toEqual({ from_s: 1, to_s: 9 });
  });
  it("keeps a short log whole", () => {
    const short = table({ gps_speed: (t) => t }, 10, 50);
    const kept = runTraces(short, { id: "r", usable: true, reasons: [], notes: [] });
    expect(kept.timeS).toHaveLength(500);
    expect(runSignals(short).speedName).toBe("gps");
  });
});
