import { describe, expect, it, vi } from "vitest";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import { findCoasts } from "@/lib/measure/run/find-coasts";
import { runSignals } from "@/lib/measure/run/run-signals";
import type { CampaignResult } from "@/lib/measure/types";
import type { AfterPull, Sensors } from "@/lib/simulate/types";
import { type Scenario, simulateCampaign } from "../../support/generator";
import { scoreCampaign } from "../../support/score-campaign";

vi.setConfig({ testTimeout: 120_000 });

const CAMPAIGN: Partial<Scenario> = { order: "ABBABAAB", directions: "+-+-+-+-", sensors: { rateHz: 25 } };
const GPS_ALONE: Partial<Sensors> = {
  undrivenWheel: false,
  drivenWheel: false,
  engineSpeed: false,
  accelerometer: false,
  rateHz: 25,
};

function analysed(changes: Partial<Scenario>, seed: number) {
  const simulated = simulateCampaign({ ...CAMPAIGN, ...changes }, seed);
  const result = analyseCampaign(simulated.campaign, simulated.logs);
  return { ...simulated, result, score: scoreCampaign(result, simulated.truth) };
}

/** Coasting stretches of one simulated run. */
function coastsOf(after: readonly AfterPull[], changes: Partial<Scenario> = {}) {
  const { logs } = simulateCampaign(
    { ...CAMPAIGN, order: "A", directions: "+", after: () => after, ...changes },
    12,
  );
  const log = logs.get("r01");
  if (!log) throw new Error("no log");
  const signals = runSignals(log);
  const speedAt = (t: number) => signals.speedRows[signals.timeS.findIndex((x) => x >= t)];
  return findCoasts(signals, null, null).map((s) => ({ from: speedAt(s.from_s), to: speedAt(s.to_s) }));
}

const codes = (result: CampaignResult) => result.runs.flatMap((run) => run.notes.map((note) => note.code));

/** Braked down to another speed each run, so that every leg coasts through other speeds; few km/h each time. */
const PIECES = (run: number): AfterPull[] => [
  { what: "neutral", seconds: 4 },
  { what: "brake", toMps: 41 - 3 * run },
  { what: "neutral", seconds: 5 },
  { what: "brake", toMps: 8 },
];

describe("Stretches of free rolling (truth: lib/simulate)", () => {
  it("finds both sides of a braked part and leaves the braked part out", () => {
    const coasts = coastsOf([
      { what: "neutral", toMps: 33 },
      { what: "brake", toMps: 27 },
      { what: "neutral", toMps: 18 },
    ]);
    expect(coasts).toHaveLength(2);
    expect(coasts[0].to).toBeGreaterThan(32.9);
    expect(coasts[1].from).toBeLessThan(27.1);
    expect(coasts[1].to).toBeGreaterThan(17.9);
  });
  it("takes an open clutch for free rolling although the gear channel names a gear", () => {
    const coasts = coastsOf([{ what: "clutch", toMps: 25 }], { logger: { gear: true } });
    expect(coasts).toHaveLength(1);
  });
  it.each([
    ["engine speed", {}],
    ["a gear channel", { sensors: { ...CAMPAIGN.sensors, engineSpeed: false }, logger: { gear: true } }],
    ["no channel that tells the gear, by how hard the car slows", { sensors: GPS_ALONE }],
  ])("never takes the overrun for free rolling: %s", (_, changes: Partial<Scenario>) => {
    expect(coastsOf([{ what: "overrun", toMps: 14 }], changes)).toEqual([]);
  });
});

describe("Coast-downs in pieces", () => {
  it("pools what the legs cover between them, within 0.6 % of the true curve", () => {
    const { result, score } = analysed({ after: PIECES }, 31);
    expect(result.runs.every((run) => run.curve !== null && run.loss?.source === "road day")).toBe(true);
    expect(score.curveRmsPct).toBeLessThan(0.6);
    expect(Math.abs(score.peakPct)).toBeLessThan(0.6);
  });
  it("takes separate coast-down runs for pulls that end in the brake", () => {
    const { result, score } = analysed({ after: () => [{ what: "brake", toMps: 8 }], coastDowns: "+-" }, 32);
    expect(codes(result)).toContain("no_own_coast_down");
    expect(result.runs.every((run) => run.usable)).toBe(true);
    expect(score.curveRmsPct).toBeLessThan(0.6);
  });
  it("below 20 km/h in all gives the difference and no absolute power", () => {
    const short = () => [{ what: "neutral", seconds: 3.5 } as const, { what: "brake", toMps: 8 } as const];
    const { result, score } = analysed({ after: short }, 33);
    expect(new Set(codes(result))).toContain("no_coast_down");
    expect(result.runs.every((run) => run.usable && run.curve === null && run.loss === null)).toBe(true);
    expect(score.deltaVsRealisedPp).toBeLessThan(0.6);
  });
  it("says whose coast-downs the losses come from", () => {
    const twins = (has: readonly boolean[]) =>
      analysed(
        {
          order: "AA",
          directions: "+-",
          after: (run) => (has[run] ? [{ what: "neutral", toMps: 20 }] : [{ what: "brake", toMps: 8 }]),
        },
        34,
      ).result.runs.map((run) => run.loss?.source);
    expect(twins([true, false])).toEqual(["run", "twin"]);
    expect(twins([true, true])).toEqual(["twin", "twin"]);
  });
  it("is less sure of resistance at speeds that nobody coasted", () => {
    const resistance = (toMps: number, fromMps: number) => {
      const after = (): AfterPull[] => [
        { what: "brake", toMps: fromMps },
        { what: "neutral", toMps },
      ];
      const { result } = analysed({ after }, 35);
      return result.runs[0].peak?.uncertainty_kw ?? 0;
    };
    expect(resistance(16, 26)).toBeGreaterThan(1.02 * resistance(16, 46));
  });
});
