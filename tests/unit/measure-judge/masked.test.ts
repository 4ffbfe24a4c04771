import { describe, expect, it, vi } from "vitest";
import type { LogTable } from "@/lib/logs/types";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";
import type { CampaignResult, Note, RunResult } from "@/lib/measure/types";
import { type Scenario, type SimulatedCampaign, simulateCampaign } from "../../support/generator";
import { scoreCampaign } from "../../support/score-campaign";
import { changed, frozen, without } from "../../support/spoil-log";

vi.setConfig({ testTimeout: 120_000 });

const ORDER: Partial<Scenario> = { order: "ABBA", directions: "+-+-", coastToMps: 20 };

/** A campaign in which some runs' logs are spoiled. */
function spoiled(changes: Partial<Scenario>, spoil: (log: LogTable, id: string) => LogTable, seed = 31) {
  const simulated = simulateCampaign({ ...ORDER, ...changes }, seed);
  const logs = new Map([...simulated.logs].map(([id, log]) => [id, spoil(log, id)]));
  return { ...simulated, result: analyseCampaign(simulated.campaign, logs) };
}

function runOf(result: CampaignResult, id: string): RunResult {
  const run = result.runs.find((r) => r.id === id);
  if (!run) throw new Error(id);
  return run;
}
const noteOf = (run: RunResult, code: string): Note | undefined =>
  run.notes.find((note) => note.code === code);
const codesOf = (result: CampaignResult) => [
  ...new Set(result.runs.flatMap((run) => run.notes.map((n) => n.code))),
];

/** Engine speeds of the grid at which a run has no torque, inside its first and last one. */
function hidden({ curve }: RunResult): number[] {
  return curve?.rpm.filter((_, k) => curve.engine_nm[k] === null) ?? [];
}

/** Largest relative error of a run's torque against the driven truth (its own power factor apart), %. */
function worstPct(simulated: SimulatedCampaign, clean: CampaignResult, run: RunResult): number {
  const before = runOf(clean, run.id).curve;
  const [lo, hi] = simulated.truth.evaluateRpm;
  return (run.curve?.rpm ?? []).reduce((worst, rpm, k) => {
    const got = run.curve?.engine_nm[k];
    const expected = before?.engine_nm[before.rpm.indexOf(rpm)];
    return rpm < lo || rpm > hi || got == null || expected == null
      ? worst
      : Math.max(worst, Math.abs(100 * (got / expected - 1)));
  }, 0);
}

const clean = spoiled({}, (log) => log);

describe("What is masked is out of torque, speed and losses (truth: lib/simulate)", () => {
  it("finds nothing in the clean campaign and every finding states its consequence", () => {
    expect(codesOf(clean.result)).toEqual([]);
    expect(scoreCampaign(clean.result, clean.truth).curveRmsPct).toBeLessThan(0.8);
  });

  it("hides the torque of a lift, and leaves the rest of the curve as it was", () => {
    const { result } = spoiled({}, (log, id) =>
      id === "r02" ? changed(log, "pedal", (v, t) => (t > 6 && t < 6.1 ? 30 : v)) : log,
    );
    const run = runOf(result, "r02");
    expect(noteOf(run, "lift")?.consequence).toBe("masked");
    expect(hidden(run).length).toBeGreaterThan(3);
    expect(hidden(runOf(result, "r01"))).toEqual([]);
    expect(worstPct(clean, clean.result, run)).toBeLessThan(0.5);
    // 60-100 km/h runs through the lift at 6 s and is no time of full load.
    expect(runOf(clean.result, "r02").times_s?.["60-100"]).toBeGreaterThan(2);
    expect(run.times_s?.["60-100"]).toBeUndefined();
    expect(runOf(result, "r01").times_s?.["60-100"]).toBeGreaterThan(2);
  });

  it("hides a frozen speed where nothing else tells it; the rest stays true", () => {
    const wheelOnly = (log: LogTable) =>
      without(log, "wheel_speed_driven", "gps_speed", "latitude", "longitude");
    const reference = spoiled({}, wheelOnly);
    const { result } = spoiled({}, (log, id) =>
      id === "r03" ? frozen(wheelOnly(log), "wheel_speed_undriven", 6, 6.6) : wheelOnly(log),
    );
    const run = runOf(result, "r03");
    const note = noteOf(run, "sensor_frozen");
    expect(note?.consequence).toBe("masked");
    expect(hidden(run).length).toBeGreaterThan(2);
    expect(worstPct(reference, reference.result, run)).toBeLessThan(4);
    expect(scoreCampaign(result, reference.truth).curveRmsPct).toBeLessThan(
      scoreCampaign(reference.result, reference.truth).curveRmsPct + 0.5,
    );
  });

  it("leaves a frozen wheel out of the speed that the other channels carry", () => {
    const { result } = spoiled({}, (log, id) =>
      id === "r03" ? frozen(log, "wheel_speed_undriven", 6, 6.6) : log,
    );
    const run = runOf(result, "r03");
    expect(noteOf(run, "sensor_frozen")?.consequence).toBe("warned");
    expect(hidden(run)).toEqual([]);
    expect(worstPct(clean, clean.result, run)).toBeLessThan(4);
  });

  it("keeps braked parts out of the losses: the good parts give the resistance", () => {
    const rolling = [{ what: "neutral" as const, toMps: 20 }];
    const reference = spoiled({ after: () => rolling }, (log) => log);
    const { result } = spoiled(
      {
        after: () => [{ what: "neutral", toMps: 32 }, { what: "brake", seconds: 1.5 }, ...rolling],
      },
      (log) => log,
    );
    for (const run of result.runs)
      expect(noteOf(run, "braked_coast")).toMatchObject({ consequence: "masked" });
    const force = ({ runs }: CampaignResult, v: number) => {
      const loss = runs[0].loss;
      return (loss?.f0_n ?? 0) + (loss?.f1_n_per_mps ?? 0) * v + (loss?.f2_n_per_mps2 ?? 0) * v * v;
    };
    for (const v of [25, 36])
      expect(Math.abs(force(result, v) / force(reference.result, v) - 1)).toBeLessThan(0.05);
  });

  it("masks wheel spin where it is, and a slipping clutch by engine speed against the driven wheels", () => {
    const spun = spoiled({ spinInRuns: [1] }, (log) => log).result;
    expect(noteOf(runOf(spun, "r02"), "wheel_spin")?.consequence).toBe("masked");
    expect(codesOf({ ...spun, runs: spun.runs.filter((r) => r.id !== "r02") })).toEqual([]);
    const slipped = spoiled({}, (log, id) =>
      id === "r04"
        ? changed(log, "engine_speed", (v, t) =>
            t > 6 && t < 7 ? v * (1 + 0.06 * Math.sin(Math.PI * (t - 6)) ** 2) : v,
          )
        : log,
    ).result;
    const note = noteOf(runOf(slipped, "r04"), "clutch_slip");
    expect(note?.consequence).toBe("masked");
    expect(note?.from_s).toBeGreaterThan(5.8);
    expect(note?.to_s).toBeLessThan(7.2);
    expect(hidden(runOf(slipped, "r04")).length).toBeGreaterThan(2);
  });
});

describe("What only several runs, or the estimate, tell", () => {
  it("finds the run whose wheel scale or GPS offset the others do not share", () => {
    const scaled = spoiled({}, (log, id) =>
      id === "r02" ? changed(log, "wheel_speed_undriven", (v) => 1.02 * v) : log,
    );
    expect(scaled.result.runs.filter((r) => noteOf(r, "wheel_scale_differs")).map((r) => r.id)).toEqual([
      "r02",
    ]);
    const late = spoiled({}, (log, id) => {
      const values = log.channels.find((c) => c.channel === "gps_speed")?.values ?? new Float64Array();
      return id === "r03" ? changed(log, "gps_speed", (_v, _t, i) => values[Math.max(0, i - 20)]) : log;
    });
    expect(late.result.runs.filter((r) => noteOf(r, "gps_offset_differs")).map((r) => r.id)).toEqual(["r03"]);
  });

  it("finds the leg that was typed the wrong way, with positions and without", () => {
    const swapped = (changes: Partial<Scenario>, seed: number) => {
      const simulated = simulateCampaign(
        { order: "ABBABAAB", directions: "+-+-+-+-", coastToMps: 20, windMps: 4, ...changes },
        seed,
      );
      const runs = simulated.campaign.runs.map((run) =>
        run.id === "r04" ? { ...run, leg: "out" as const } : run,
      );
      return analyseCampaign({ ...simulated.campaign, runs }, simulated.logs).runs.flatMap((run) =>
        run.notes.filter((n) => n.code.startsWith("leg_")).map((n) => `${run.id} ${n.code}`),
      );
    };
    expect(swapped({}, 33)).toEqual(["r04 leg_disagrees"]);
    expect(swapped({ sensors: { position: false, accelerometer: false } }, 33)).toEqual(["r04 leg_doubtful"]);
  });

  it("names the gear that fits where the typed one does not", () => {
    const simulated = simulateCampaign(ORDER, 34);
    const runs = simulated.campaign.runs.map((run) => ({ ...run, gear: (run.gear ?? 0) + 1 }));
    const { result } = { result: analyseCampaign({ ...simulated.campaign, runs }, simulated.logs) };
    expect(noteOf(result.runs[0], "gear_disagrees")?.message).toContain(
      `fit gear ${simulated.campaign.runs[0].gear}`,
    );
  });

  it("says so where only driven wheels tell the speed", () => {
    const { result } = spoiled(
      { sensors: { undrivenWheel: false, gps: false, position: false } },
      (log) => log,
    );
    expect(codesOf(result).sort()).toEqual(["scale_not_checked", "slip_not_checked"]);
  });

  it("says so without coast-downs", () => {
    const { result } = spoiled({ coastToMps: 60 }, (log) => log);
    expect(noteOf(result.runs[0], "no_coast_down")?.consequence).toBe("warned");
  });
});
