import { readdirSync, readFileSync } from "node:fs";
import { describe, expect, it, vi } from "vitest";
import { readLog } from "@/lib/logs/read-log";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import { prepareRun } from "@/lib/measure/run/prepare-run";
import type { Campaign, CampaignResult } from "@/lib/measure/types";
import { type Scenario, simulateCampaign } from "../../support/generator";
import { goldenCampaign } from "../../support/golden-campaign";

vi.setConfig({ testTimeout: 240_000 });

const LOGS = new URL("../../golden/logs/", import.meta.url);

/** "code (consequence)" of every finding, each once. */
function found(result: CampaignResult): string[] {
  const all = result.runs.flatMap((run) => [...run.reasons, ...run.notes]);
  return [...new Set(all.map((note) => `${note.code} (${note.consequence})`))].sort();
}

/** Golden logs of one folder, judged as runs of the hatch of p1. */
function foundInLogs(folder: string, kind: "pull" | "sprint"): Record<string, string[]> {
  const { campaign } = goldenCampaign("p1-hatch-a-b");
  const out: Record<string, string[]> = {};
  for (const file of readdirSync(new URL(`${folder}/`, LOGS)).filter((name) => name.includes(".csv"))) {
    const log = readLog(readFileSync(new URL(`${folder}/${file}`, LOGS)), { fileName: file, drive: "FWD" });
    const run = { ...campaign.runs[0], id: file, kind };
    const { notes, reasons } = prepareRun(run, campaign.vehicle, log);
    const codes = [...new Set([...reasons, ...notes].map((note) => note.code))].sort();
    if (codes.length > 0) out[file.slice(0, 3)] = codes;
  }
  return out;
}

describe("Runs without a fault: no finding, or a true one", () => {
  it.each(["p1-hatch-a-b", "p2-coupe-a-c", "p3-estate-a-b"])("%s has none", (id) => {
    const { campaign, logs } = goldenCampaign(id);
    const allowed = id === "p3-estate-a-b" ? ["factor_out_of_range (warned)"] : [];
    const result = analyseCampaign(campaign, logs);
    expect(found(result).filter((code) => !allowed.includes(code))).toEqual([]);
    expect(result.runs.every((run) => run.usable)).toBe(true);
  });

  it("the ways of writing a log have only what was written into them (tests/golden/README.md)", () => {
    expect(foundInLogs("dialects", "pull")).toEqual({
      d07: ["midnight_passed"],
      d08: ["rows_out_of_order"],
      d09: ["gap", "repeated_time"],
      d10: ["preamble", "rows_refused"],
      d12: ["repeated_header"],
    });
  });

  it("the sprints have none", () => expect(foundInLogs("sprints", "sprint")).toEqual({}));

  const FRESH: [string, Partial<Scenario>, string[]][] = [
    ["wheel, GPS, engine speed", {}, []],
    ["10 rows a second", { sensors: { rateHz: 10 } }, []],
    ["strong gusty wind", { windMps: 4, windBetweenRunsMps: 1, gustMps: 1 }, []],
    ["undulating strip", { undulation: 2 }, []],
    ["wheel speed 3 % too high", { sensors: { wheelScale: 1.03 } }, []],
    ["one direction only", { directions: "++++", windMps: 3 }, []],
    ["diesel, all wheels driven", { car: "estate", sensors: { undrivenWheel: false, rateHz: 25 } }, []],
    ["slower sources held row by row, gear logged", { logger: { rpmHz: 10, wheelHz: 20, gear: true } }, []],
    ["a shift before the pull", { approachRatio: 1.5 }, []],
    ["a slow pedal", { pedalRampS: 0.6 }, []],
    ["a waving torque curve", { ripple: 0.02 }, []],
    ["a lighter car", { massTypedOverTrue: 0.97 }, []],
    [
      "GPS alone at 10 Hz",
      {
        sensors: {
          ...{ undrivenWheel: false, drivenWheel: false, engineSpeed: false, pedal: false },
          ...{ accelerometer: false, rateHz: 10 },
        },
      },
      ["gear_not_checked (warned)", "load_not_logged (warned)"],
    ],
  ];
  it.each(FRESH)("%s", (_, changes, expected) => {
    for (const seed of [51, 52]) {
      const order = { order: "ABBA", directions: "+-+-", ...changes };
      const { campaign, logs } = simulateCampaign(order, seed);
      expect(found(analyseCampaign(campaign, logs))).toEqual(expected);
    }
  });

  it("masks wheel spin of a car whose wheels are all driven, by GPS, and only in the run that has it", () => {
    const sensors = { undrivenWheel: false, rateHz: 25, gpsHz: 25 };
    const simulated = simulateCampaign(
      { car: "estate", order: "ABBA", directions: "+-+-", spinInRuns: [2], sensors },
      53,
    );
    const campaign: Campaign = simulated.campaign;
    const spun = analyseCampaign(campaign, simulated.logs).runs.filter((run) => run.notes.length > 0);
    expect(spun.map((run) => [run.id, ...run.notes.map((note) => note.code)])).toEqual([
      ["r03", "wheel_spin"],
    ]);
  });
});
