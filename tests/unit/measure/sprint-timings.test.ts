import { describe, expect, it } from "vitest";
import { parseCampaignFile } from "@/lib/campaign/campaign-schema";
import { motionTrace } from "@/lib/measure/sprint/acceleration";
import { addFalls } from "@/lib/measure/sprint/add-falls";
import { fallSensitivity } from "@/lib/measure/sprint/fall-sensitivity";
import { type NetFall, pooledFalls } from "@/lib/measure/sprint/net-fall";
import { rollOnTimes } from "@/lib/measure/sprint/roll-on";
import { toTimingSettings } from "@/lib/measure/sprint/sheet-timings";
import { STANDARD_TIMINGS, timingsOf } from "@/lib/measure/sprint/timings";
import type { CampaignRun, RunResult } from "@/lib/measure/types";
import { sheetTimings } from "@/lib/services/vehicle-sheets/schema-timings";
import { checkValue, checkValues } from "../../support/check-values";
import { expectClose } from "../../support/expect-close";

const trace = (speed: (t: number) => number, toS: number, stepS = 0.01) => {
  const timeS = Float64Array.from({ length: Math.round(toS / stepS) + 1 }, (_, i) => i * stepS);
  return motionTrace(timeS, timeS.map(speed));
};
const EXACT = { deviationMps: 0, scale: 0 };

describe("own pairs and distances", () => {
  it("are named as they are written, beside the usual ones, each once", () => {
    const timings = timingsOf({
      speed_pairs: [
        { from_kmh: 90, to_kmh: 130 },
        { from_mph: 30, to_mph: 90 },
        { from_kmh: 60, to_kmh: 100 },
      ],
      distances_m: [304.8, 1000],
    });
    const added = (list: readonly { name: string }[], usual: readonly { name: string }[]) =>
      list.slice(usual.length).map(({ name }) => name);
    expect(added(timings.pairs, STANDARD_TIMINGS.pairs)).toEqual(["90-130", "30-90 mph"]);
    expect(added(timings.distances, STANDARD_TIMINGS.distances)).toEqual(["304.8 m"]);
    // 90 mph = 40.2336 m/s exactly.
    expectClose(timings.pairs.find(({ name }) => name === "30-90 mph")?.toMps, 40.2336, { abs: 1e-12 });
  });

  it("are read from the sheet's form as they are typed, and come to the analysis", () => {
    const read = sheetTimings.parse({
      speedPairs: "90-130, 30 – 90 mph  0-80,5",
      distancesM: "304,8 804.672",
      fallLimitPct: "0,3",
    });
    expect(toTimingSettings(read)).toEqual({
      speed_pairs: [
        { from_kmh: 90, to_kmh: 130 },
        { from_mph: 30, to_mph: 90 },
        { from_kmh: 0, to_kmh: 80.5 },
      ],
      distances_m: [304.8, 804.672],
      fall_limit_pct: 0.3,
    });
    expect(sheetTimings.parse(read)).toEqual(read);
    expect(sheetTimings.parse({ speedPairs: " ", distancesM: "", fallLimitPct: "" })).toBeUndefined();
    expect(toTimingSettings(undefined)).toEqual({});
  });

  it.each([
    [{ speedPairs: "130-90" }, /second speed must be above/],
    [{ speedPairs: "fast" }, /"fast" is not a pair of speeds/],
    [{ distancesM: "2 km" }, /"2" is not a distance between 5 and 5000 m/],
  ])("are refused with a plain sentence: %j", (wrong, words) => {
    const raw = { speedPairs: "", distancesM: "", fallLimitPct: "", ...wrong };
    expect(sheetTimings.safeParse(raw).error?.issues[0].message).toMatch(words);
  });

  it("are part of the campaign file, and a pair the wrong way round is named", () => {
    const file = (settings: object) =>
      JSON.stringify({
        campaign: 1,
        vehicle: {
          engine: "spark ignition",
          aspiration: "turbo",
          drive: "FWD",
          mass_kg: 1500,
          redline_rpm: 6600,
        },
        runs: [{ id: "r1", file: "r1.csv", kind: "sprint" }],
        settings,
      });
    const own = { speed_pairs: [{ from_mph: 60, to_mph: 130 }], distances_m: [304.8], fall_limit_pct: 1 };
    expect(parseCampaignFile(file(own)).campaign.settings).toMatchObject(own);
    expect(() => parseCampaignFile(file({ speed_pairs: [{ from_kmh: 130, to_kmh: 90 }] }))).toThrow(
      /speed_pairs.0: the second speed must be above the first/,
    );
  });
});

describe("closed forms of roll-on times", () => {
  const power = checkValue("acc.constpower");
  it(`${power.id} — ${power.source}`, () => {
    const { P_W, m_kg } = power.inputs;
    const { timeS, speedMps } = trace((t) => Math.sqrt((2 * P_W * t) / m_kg), 14, 0.001);
    expectClose(rollOnTimes(timeS, speedMps, EXACT).times_s["80-120"], power.expected.t_80_120, {
      rel: 1e-6,
    });
  });
  it("a speed scale moves both ends together: ε (v₂ − v₁)/a at constant acceleration, not their root sum of squares", () => {
    const { timeS, speedMps } = trace((t) => 15 + 3 * t, 12);
    const got = rollOnTimes(timeS, speedMps, { deviationMps: 0, scale: 0.01 });
    // 40 km/h at 3 m/s²: 3.7037 s, of which 1 %; the clock's 100 in a million adds nothing that shows.
    expectClose(got.times_uncertainty_s["80-120"], 0.037037, { abs: 1e-5 });
  });
});

describe("net fall and its effect", () => {
  it("at constant acceleration is t·Δa/a at a speed and half of it at a way (closed form)", () => {
    const { ofSpeedS, ofWayS } = fallSensitivity(trace((t) => 4 * t, 12));
    const perPct = 9.80665 * Math.sin(Math.atan(0.01));
    expectClose(ofSpeedS(8), (8 * perPct) / 4, { rel: 1e-3 });
    expectClose(ofWayS(8), (8 * perPct) / 8, { rel: 2e-3 });
  });
  for (const value of checkValues("acc.slope.")) {
    it(`${value.id} (to first order) — ${value.source}`, () => {
      const { timeS, speedMps } = trace((t) => 20 + 3 * t, 12);
      const got = rollOnTimes(timeS, speedMps, EXACT).sensitivityS["80-120"] * value.inputs.slope_percent;
      const { dt_80_120_at_3ms2_uphill_loss: loss, dt_80_120_at_3ms2_downhill_gain: gain } = value.expected;
      expectClose(got, (loss + gain) / 2, { rel: 0.01 });
    });
  }

  const fall = (pct: number, uncertaintyPct = 0.1): NetFall => ({ pct, uncertaintyPct, from: "altitude" });
  it("is pooled over out and back of a road day, and kept where the runs do not agree", () => {
    const [out, back, blind] = pooledFalls([
      { leg: "out", roadDay: "d", fall: fall(0.3) },
      { leg: "back", roadDay: "d", fall: fall(-0.2) },
      { leg: "back", roadDay: "d", fall: null },
    ]);
    // Weights 1/0.1² and, for the other leg, 1/(0.1² + 0.15²) = 100 and 30.769.
    expectClose(out?.pct, (0.3 * 100 + 0.2 * 30.76923) / 130.76923, { abs: 1e-6 });
    expectClose(out?.uncertaintyPct, 1 / Math.sqrt(130.76923), { abs: 1e-6 });
    expectClose(back?.pct, -(0.2 * 100 + 0.3 * 30.76923) / 130.76923, { abs: 1e-6 });
    expect(blind?.from).toBe("pooled altitude");
    expect(blind?.uncertaintyPct).toBeGreaterThan(out?.uncertaintyPct ?? 0);
    const apart = pooledFalls([
      { leg: "out", roadDay: "d", fall: fall(0.9) },
      { leg: "back", roadDay: "d", fall: fall(0.9) },
    ]);
    expect(apart.map((one) => one?.from)).toEqual(["altitude", "altitude"]);
  });

  it("beyond the lead's limit a sprint gets a note, without altitude it says that it is not known", () => {
    const run = (id: string): CampaignRun => ({ id, file: "", kind: "sprint", leg: "out" });
    const result = (id: string): RunResult => ({
      id,
      usable: true,
      reasons: [],
      notes: [],
      times_s: { "0-50": 3 },
    });
    const codes = (found: NetFall | null, limit?: number) => {
      const results = [result("r1")];
      addFalls(
        {
          runs: [run("r1")],
          settings: { factor: "auto", rpm_step: 50, level: 0.95, seed: 1, fall_limit_pct: limit ?? null },
        },
        results,
        new Map([["r1", { fall: found, sensitivityS: { "0-50": 0.03 } }]]),
      );
      return { codes: results[0].notes.map((note) => note.code), result: results[0] };
    };
    expect(codes(fall(0.6)).codes).toEqual(["net_fall_beyond_limit"]);
    expect(codes(fall(0.6), 1).codes).toEqual([]);
    expect(codes(fall(-0.4), 0.3).codes).toEqual(["net_fall_beyond_limit"]);
    expect(codes(null)).toMatchObject({
      codes: ["net_fall_not_known"],
      result: { net_fall_pct: null, fall_effect_s: {} },
    });
    // 0.6 % of fall at 0.03 s a percent makes the run 0.018 s quicker.
    expectClose(codes(fall(0.6)).result.fall_effect_s?.["0-50"], -0.018, { abs: 1e-12 });
  });
});
