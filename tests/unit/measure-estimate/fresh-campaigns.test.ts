import { describe, expect, it, vi } from "vitest";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import type { CampaignResult } from "@/lib/measure/types";
import { type Scenario, type SimulatedCampaign, simulateCampaign } from "../../support/generator";
import { type Score, scoreCampaign } from "../../support/score-campaign";
import { studyCampaign } from "../../support/study-campaigns";

vi.setConfig({ testTimeout: 120_000 });

interface Analysed extends SimulatedCampaign {
  result: CampaignResult;
  score: Score;
}

function analysed(changes: Partial<Scenario>, seed: number): Analysed {
  const simulated = simulateCampaign(changes, seed);
  const result = analyseCampaign(simulated.campaign, simulated.logs);
  return { ...simulated, result, score: scoreCampaign(result, simulated.truth) };
}

const codes = ({ result }: Analysed) => [
  ...new Set(result.runs.flatMap((run) => run.notes.map((note) => note.code))),
];

/**
 * Campaigns that the estimator was not tuned on: own generator, own cars, conditions varied one by one. Limits are about twice
 * what was measured over 60 draws of each, so that a worse estimator fails and luck does not.
 */
const SCENARIOS: [string, Partial<Scenario>, { peak: number; curve: number; delta: number }][] = [
  ["front drive, wheel channel", { gainPct: 6 }, { peak: 0.6, curve: 0.5, delta: 0.5 }],
  [
    "all-wheel drive diesel, GPS and driven wheels",
    { car: "estate", sensors: { undrivenWheel: false, rateHz: 25, gpsHz: 25, wheelScale: 1.006 } },
    { peak: 0.8, curve: 0.7, delta: 0.6 },
  ],
  ["10 rows a second", { sensors: { rateHz: 10 } }, { peak: 0.8, curve: 0.7, delta: 0.7 }],
  [
    "GPS and engine speed at 10 Hz",
    { sensors: { undrivenWheel: false, drivenWheel: false, rateHz: 10 } },
    { peak: 1, curve: 0.9, delta: 0.8 },
  ],
  [
    "GPS alone at 10 Hz, no engine speed, no pedal",
    {
      sensors: {
        undrivenWheel: false,
        drivenWheel: false,
        engineSpeed: false,
        pedal: false,
        accelerometer: false,
        rateHz: 10,
      },
    },
    { peak: 1.5, curve: 1.4, delta: 1.2 },
  ],
  ["engine speed in steps of 50", { sensors: { rpmStep: 50 } }, { peak: 0.6, curve: 0.5, delta: 0.5 }],
  ["wheel speed 3 % too high", { sensors: { wheelScale: 1.03 } }, { peak: 0.6, curve: 0.5, delta: 0.5 }],
  [
    "wheel speed in steps of 0.5 km/h",
    { sensors: { wheelStepKmh: 0.5 } },
    { peak: 0.7, curve: 0.6, delta: 0.6 },
  ],
  [
    "driven wheels alone tell the speed",
    { sensors: { undrivenWheel: false, gps: false, position: false } },
    { peak: 1, curve: 1, delta: 0.6 },
  ],
  ["another mass every run", { extraMassKg: (run) => 40 * (run % 4) }, { peak: 0.6, curve: 0.5, delta: 0.5 }],
  [
    "a shift before the pull, a slow pedal",
    { approachRatio: 1.42, pedalRampS: 0.4 },
    { peak: 0.6, curve: 0.7, delta: 0.5 },
  ],
  ["undulating strip", { undulation: 2 }, { peak: 0.8, curve: 0.6, delta: 0.6 }],
  [
    "undulating strip without accelerometer",
    { undulation: 2, sensors: { accelerometer: false } },
    { peak: 1, curve: 0.9, delta: 0.9 },
  ],
  [
    "strong gusty wind",
    { windMps: 4, windBetweenRunsMps: 1, gustMps: 1 },
    { peak: 1.2, curve: 1, delta: 1.2 },
  ],
  ["one direction only", { directions: "++++++++", windMps: 3 }, { peak: 1.2, curve: 1, delta: 0.6 }],
  [
    "no position, no accelerometer",
    { sensors: { position: false, accelerometer: false } },
    { peak: 1, curve: 1, delta: 0.7 },
  ],
  ["cold diesel", { car: "estate", tempC: 2 }, { peak: 0.8, curve: 0.9, delta: 0.6 }],
];

describe("Fresh campaigns (truth: lib/simulate)", () => {
  it.each(SCENARIOS)("%s", (_, changes, limits) => {
    const draws = [41, 42].map((seed) => analysed(changes, seed));
    const mean = (of: (score: Score) => number) =>
      draws.reduce((sum, draw) => sum + of(draw.score), 0) / draws.length;
    for (const { result } of draws) expect(result.runs.every((run) => run.usable)).toBe(true);
    expect(mean((s) => Math.abs(s.peakPct))).toBeLessThan(limits.peak);
    expect(mean((s) => s.curveRmsPct)).toBeLessThan(limits.curve);
    expect(mean((s) => s.deltaVsRealisedPp)).toBeLessThan(limits.delta);
  });

  it("masks wheel spin in the runs that have it, and only there", () => {
    const spun = analysed({ spinInRuns: [1, 4] }, 3);
    const spinning = spun.result.runs.filter((run) => run.notes.some((note) => note.code === "wheel_spin"));
    expect(spinning.map((run) => run.id)).toEqual(["r02", "r05"]);
    const { curve } = spinning[0];
    const hidden = curve?.rpm.filter((_, k) => curve.engine_nm[k] === null) ?? [];
    expect(hidden.length).toBeGreaterThan(3);
    expect(Math.min(...hidden)).toBeGreaterThan(2300);
    expect(Math.max(...hidden)).toBeLessThan(3600);
    expect(spun.score.deltaVsRealisedPp).toBeLessThan(0.5);
  });

  it("without any coast-down shows a difference and no absolute power", () => {
    const bare = analysed({ coastToMps: 60, gainPct: 6 }, 5);
    expect(codes(bare)).toContain("no_coast_down");
    expect(bare.result.runs.every((run) => run.usable && run.curve === null && run.peak === null)).toBe(true);
    expect(bare.result.sides.A.engine_kw.every((kw) => kw === null)).toBe(true);
    expect(bare.score.deltaVsRealisedPp).toBeLessThan(0.6);
  });

  it("warns of an order that can't tell drift from the change, and its band holds the truth all the same", () => {
    const blocked = analysed({ order: "AAAABBBB", driftPerRun: -0.003 }, 6);
    expect(blocked.result.delta?.warnings?.map((w) => w.code)).toContain("order_cannot_separate");
    expect(blocked.score.bandHolds).toBe(true);
    expect(blocked.score.claims).toEqual([]);
    const balanced = analysed({ driftPerRun: -0.003 }, 6);
    expect(blocked.score.halfWidthPp).toBeGreaterThan(1.5 * balanced.score.halfWidthPp);
  });

  it("knows an undulating road by altitude pooled over its runs: without one the curve errs at least twice as much", () => {
    const rms = (altitude: boolean) =>
      [41, 42, 43].reduce((sum, seed) => {
        const sensors = { accelerometer: false, rateHz: 25 };
        const { campaign, logs, truth } = simulateCampaign(
          { undulation: 2, order: "ABBA", directions: "+-+-", sensors },
          seed,
        );
        const kept = new Map(
          [...logs].map(([id, log]) => [
            id,
            { ...log, channels: log.channels.filter((c) => altitude || c.channel !== "altitude") },
          ]),
        );
        return sum + scoreCampaign(analyseCampaign(campaign, kept), truth).curveRmsPct / 3;
      }, 0);
    expect(rms(true)).toBeLessThan(0.5 * rms(false));
  });

  it("never mixes bases: one run without weather leaves every side in the air of its day, told", () => {
    const { campaign, logs } = simulateCampaign({ order: "ABBA", directions: "+-+-" }, 9);
    const whole = analyseCampaign(campaign, logs);
    expect([whole.sides.A.basis, whole.sides.B.basis, whole.delta?.basis]).toEqual(
      Array(3).fill("reference"),
    );
    const runs = campaign.runs.map((run) => (run.id === "r02" ? { ...run, weather: null } : run));
    const open = analyseCampaign({ ...campaign, runs }, logs);
    expect([open.sides.A.basis, open.sides.B.basis, open.delta?.basis]).toEqual(Array(3).fill("day"));
    expect(open.warnings?.map(({ code }) => code)).toContain("factor_not_for_all");
    const factor = whole.runs[0].factor?.value ?? 1;
    expect(Math.abs(factor - 1)).toBeGreaterThan(0.003);
    // Side A has the same air all day: uncorrected is corrected over its factor.
    const [corrected, plain] = [whole, open].map((of) => of.sides.A.peak?.engine_kw ?? Number.NaN);
    expect(Math.abs((plain * factor) / corrected - 1)).toBeLessThan(0.002);
  });

  it("tells a factor outside its range and a scale that nothing checks", () => {
    expect(codes(analysed({ car: "estate", tempC: 2 }, 7))).toContain("factor_out_of_range");
    expect(codes(analysed({ sensors: { gps: false, position: false } }, 8))).toContain("scale_not_checked");
  });
});

describe("Study in small (24 campaigns of 6 + 6 runs at 25 rows a second, kinds mixed; the long form is `npm run soak:coverage`)", () => {
  it("holds the whole truth in at least 19 of 24 and claims falsely in at most 3 of 12 (each below 0.6 % by chance at 93 % and 6 %)", () => {
    const outcomes = Array.from({ length: 24 }, (_, k) => studyCampaign(1_900_000 + k));
    const still = outcomes.filter((outcome) => outcome.gainPct === 0);
    expect(still).toHaveLength(12);
    expect(outcomes.every((outcome) => outcome.usable === 12)).toBe(true);
    expect(outcomes.filter((outcome) => outcome.held).length).toBeGreaterThanOrEqual(19);
    expect(still.filter((outcome) => outcome.claimed).length).toBeLessThanOrEqual(3);
    expect(
      outcomes.filter((outcome) => outcome.gainPct !== 0 && outcome.claimed).length,
    ).toBeGreaterThanOrEqual(8);
  });
});
