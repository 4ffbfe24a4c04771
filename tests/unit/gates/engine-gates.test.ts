import { describe, expect, it } from "vitest";
import { evaluateGates } from "@/lib/gates/evaluate-gates";
import type { EvidenceRun, GateEvidence } from "@/lib/gates/evidence";
import type { ChannelLimitGate, Gate, GateState } from "@/lib/gates/plan";
import { startingPlan } from "@/lib/gates/starting-plan";
import type { RunFullLoad } from "@/lib/measure/engine/full-load-types";
import type { CampaignResult, SideResult } from "@/lib/measure/types";
import { gatePlanSchema } from "@/lib/services/gate-plans/schema";
import { channelBetween, fullLoad } from "./full-load-sample";

const RUN: EvidenceRun = {
  ...{ id: "", side: "B", leg: "out", order: 1, roadDay: "d1", gear: 3, massKg: 1486 },
  ...{ tempC: 18, pressureHpa: 1003, tyreFrontKpa: 240, tyreRearKpa: 230, fuel: "98" },
};

/** Side B with one pull for each set of engine channels; `null`: a result from before they were read. */
function evidence(
  pulls: readonly (RunFullLoad | null)[],
  over: Partial<GateEvidence> = {},
  side: Partial<SideResult> = {},
): GateEvidence {
  const runs = pulls.map((_, k) => ({ ...RUN, id: `r${k + 1}`, order: k + 1 }));
  const result: CampaignResult = {
    analysis_version: "test",
    runs: pulls.map((load, k) => ({
      ...{ id: `r${k + 1}`, usable: true, reasons: [], notes: [] },
      segments: { pull: { from_s: 2, to_s: 10 } },
      ...(load && { full_load: load }),
    })),
    sides: {
      B: { n: pulls.length, basis: "day", rpm: [], engine_kw: [], engine_nm: [], peak: null, ...side },
    },
  };
  const vehicle = { redlineRpm: 6500, engine: "spark ignition", aspiration: "turbo" } as const;
  return { result, runs, ...vehicle, calibration: null, ...over };
}

const limit = (changes: Partial<ChannelLimitGate>): Gate => ({
  ...{ id: "l", kind: "channel_limit", level: "must", quantity: "knock_retard" },
  ...{ min: null, max: 3, leastLoadS: 3, ...changes },
});
const one = (gate: Gate, e: GateEvidence) => evaluateGates({ plan: 1, gates: [gate] }, e)[0];
const knock = (...highest: number[]) =>
  highest.map((high) => fullLoad({ channels: { knock_retard: channelBetween(0, high) } }));

describe("Limit of an engine channel", () => {
  it.each<[string, number[], GateState]>([
    // Mean 1.1, s 0.1, n 4: ± 0.16 (t 3.182).
    ["all pulls clear of it", [1, 1.1, 1.2, 1.1], "met"],
    ["one pull beyond", [1, 1.1, 3.2, 1.1], "too_little"],
    // Mean 2.725, s 0.19, n 4: ± 0.30, up to 3.03.
    ["every pull inside, but not the interval of the mean", [2.9, 2.8, 2.7, 2.45], "too_little"],
    ["every pull and the whole interval beyond", [3.9, 4, 4.1, 4], "not_met"],
    ["two pulls carry no interval", [1, 1], "too_little"],
  ])("%s", (_, values, state) => expect(one(limit({}), evidence(knock(...values))).state).toBe(state));

  it("names the worst pull, the interval, the count and the limit", () => {
    const got = one(limit({}), evidence(knock(1, 1.1, 1.2, 1.1)));
    expect(got.title).toBe("Knock retard at most 3° at full load");
    expect(got.why).toBe("Highest 1.2° in run r3; the mean of 4 pulls is 1.1 ± 0.1°, the limit 3°.");
  });

  it("is not met while usable pulls do not tell it, and says how many and what to do", () => {
    const bare = fullLoad({ channels: {} });
    const told = knock(1, 1.1, 1.2, 1.1);
    const some = one(limit({}), evidence([...told, bare]));
    expect(some.state).toBe("too_little");
    expect(some.why).toMatch(/the limit 3°\. 1 of 5 usable pulls on side B does not tell it\.$/);
    expect(some.next).toContain("Log this channel on every pull");
    const few = one(limit({}), evidence([...told.slice(1), ...Array.from({ length: 9 }, () => bare)]));
    expect(few).toMatchObject({ state: "too_little", why: expect.stringContaining("9 of 12 usable pulls") });
    // Whoever is beyond in the recorded pulls is beyond, whatever the others did.
    expect(one(limit({}), evidence([...knock(3.9, 4, 4.1, 4), bare]))).toMatchObject({
      state: "not_met",
      why: expect.stringContaining("1 of 5 usable pulls on side B does not tell it."),
    });
  });

  it("does not ask it of a pull that is not usable", () => {
    const scene = evidence([...knock(1, 1.1, 1.2, 1.1), fullLoad({ channels: {} })]);
    if (scene.result) scene.result.runs[4].usable = false;
    expect(one(limit({}), scene).state).toBe("met");
  });

  it("is too little where the channel is not recorded, and says so", () => {
    const bare = evidence([fullLoad({ channels: {} }), fullLoad({ channels: {} })]);
    expect(one(limit({}), bare)).toMatchObject({ state: "too_little", why: "Not recorded on side B." });
    expect(one(limit({}), evidence([null, null, null]))).toMatchObject({
      state: "too_little",
      next: "Recompute the comparison.",
    });
  });

  it("holds both ends of a range", () => {
    const lambda = (low: number, high: number) =>
      [0, 0.002, 0.004].map((d) => fullLoad({ channels: { lambda: channelBetween(low + d, high + d) } }));
    const gate = limit({ quantity: "lambda", min: 0.78, max: 0.9 });
    expect(one(gate, evidence(lambda(0.84, 0.88))).state).toBe("met");
    expect(one(gate, evidence(lambda(0.74, 0.88))).state).toBe("not_met");
    expect(one(gate, evidence(lambda(0.84, 0.93))).state).toBe("not_met");
  });

  it("asks for the time at load that the limit needs, but a value beyond speaks after a short pull too", () => {
    const exhaust = (high: number) =>
      [0, 2, 4].map((d) =>
        fullLoad({ load_s: 9, channels: { exhaust_temperature: channelBetween(600, high + d) } }),
      );
    const gate = limit({ quantity: "exhaust_temperature", max: 950, leastLoadS: 20 });
    const short = one(gate, evidence(exhaust(880)));
    expect(short.state).toBe("too_little");
    expect(short.why).toContain("holds full load for 9 s; this limit needs 20 s");
    expect(one({ ...gate, leastLoadS: 8 } as Gate, evidence(exhaust(880))).state).toBe("met");
    expect(one(gate, evidence(exhaust(990))).state).toBe("not_met");
  });

  it("does not apply where it makes no sense for the engine", () => {
    const diesel = evidence([fullLoad()], { engine: "compression ignition" });
    expect(one(limit({}), diesel).state).toBe("does_not_apply");
    const natural = evidence([fullLoad()], { aspiration: "natural" });
    expect(one(limit({ quantity: "boost_overshoot", max: 15 }), natural).state).toBe("does_not_apply");
  });

  it("says why an overshoot can't be told", () => {
    const boost = { ...fullLoad().boost, overshoot_kpa: null, reference: null, why: "It never settles." };
    const open = evidence([fullLoad({ boost: boost as RunFullLoad["boost"] })]);
    expect(one(limit({ quantity: "boost_overshoot", max: 15 }), open).why).toBe("It never settles.");
  });
});

describe("Smooth curve", () => {
  const gate: Gate = { id: "s", kind: "smooth_curve", level: "must", withinPct: 2 };
  const smooth = (deviation: number, half: number) =>
    evidence(
      [fullLoad()],
      {},
      {
        smoothness: {
          rpm: [3000, 3050, 3100],
          deviation_pct: [0.1, deviation, null],
          half_width_pct: [0.5, half, null],
        },
      },
    );
  it.each<[number, number, GateState]>([
    [1.2, 0.7, "met"],
    [1.2, 0.9, "too_little"],
    [-2.6, 0.7, "too_little"],
    [-2.8, 0.7, "not_met"],
  ])("largest deviation %d ± %d %%", (deviation, half, state) => {
    expect(one(gate, smooth(deviation, half)).state).toBe(state);
  });

  it("is too little where the curve has a hole inside the judged range", () => {
    const smoothness = {
      rpm: [3000, 3050, 3100],
      deviation_pct: [0.1, null, 0.1],
      half_width_pct: [0.5, null, 0.5],
    };
    const found = one(gate, evidence([fullLoad()], {}, { smoothness }));
    expect(found.state).toBe("too_little");
    expect(found.why).toContain("3,050 per minute");
  });

  it("is too little with few pulls, without any, and on an older result", () => {
    expect(one(gate, evidence([fullLoad()], {}, { smoothness: null })).state).toBe("too_little");
    expect(one(gate, evidence([fullLoad()])).next).toBe("Recompute the comparison.");
    expect(one(gate, evidence([], { result: null })).state).toBe("too_little");
  });
});

describe("Starting plan", () => {
  const ids = (...kind: Parameters<typeof startingPlan>) =>
    startingPlan(...kind).gates.flatMap((g) => (g.kind === "channel_limit" ? [g.quantity] : []));

  it("asks for what makes sense for the engine", () => {
    expect(ids()).toContain("knock_retard");
    expect(ids({ engine: "compression ignition", aspiration: "turbo" })).not.toContain("knock_retard");
    expect(ids({ engine: "spark ignition", aspiration: "natural" })).not.toContain("boost_overshoot");
  });

  it("passes its own form, and so does a plan from before these gates", () => {
    const plan = startingPlan();
    expect(gatePlanSchema.parse(plan)).toEqual(plan);
    const older = {
      ...plan,
      gates: plan.gates.filter(({ kind }) => kind !== "channel_limit" && kind !== "smooth_curve"),
    };
    expect(gatePlanSchema.parse(older)).toEqual(older);
    expect(evaluateGates(older, evidence([fullLoad()])).some((r) => r.id.startsWith("limit."))).toBe(false);
  });

  it("takes no limit without a number and none upside down", () => {
    const plan = (min: string, max: string) => ({ plan: 1, gates: [{ ...limit({}), min, max }] });
    expect(gatePlanSchema.safeParse(plan("", "")).success).toBe(false);
    expect(gatePlanSchema.safeParse(plan("4", "3")).success).toBe(false);
    expect(gatePlanSchema.safeParse(plan("", "3")).success).toBe(true);
  });
});
