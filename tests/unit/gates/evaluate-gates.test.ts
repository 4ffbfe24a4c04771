import { describe, expect, it } from "vitest";
import { evaluateGates } from "@/lib/gates/evaluate-gates";
import type { EvidenceRun, GateEvidence } from "@/lib/gates/evidence";
import type { Gate, GateState } from "@/lib/gates/plan";
import { startingPlan } from "@/lib/gates/starting-plan";
import { figure } from "@/lib/gates/verdict";
import type { CampaignResult, DeltaResult } from "@/lib/measure/types";
import { calibration } from "@/tests/support/change-set-sample";
import { fullLoad } from "./full-load-sample";

const RPM = Array.from({ length: 91 }, (_, k) => 1700 + 50 * k);
const ORDER = "ABBABAABABBA";

function runs(order = ORDER): EvidenceRun[] {
  return [...order].map((side, i) => ({
    id: `r${i + 1}`,
    side: side === "A" ? "A" : "B",
    leg: i % 2 === 0 ? "out" : "back",
    order: i + 1,
    roadDay: "d1",
    gear: 3,
    massKg: 1486,
    tempC: 18,
    pressureHpa: 1003,
    tyreFrontKpa: 240,
    tyreRearKpa: 230,
    fuel: "98 octane, batch 7",
  }));
}

function delta(changes: Partial<DeltaResult> = {}): DeltaResult {
  const twins = ["A", "B"].flatMap((side) =>
    [1, 2, 3].map((k) => ({ side, out: `${side}${k}o`, back: `${side}${k}b`, closure_pct: 0.4 * k })),
  );
  return {
    quantity: "engine_nm",
    basis: "day",
    rpm: RPM,
    pct: RPM.map(() => 1),
    low_pct: RPM.map(() => -0.5),
    high_pct: RPM.map(() => 2.5),
    abs_nm: RPM.map(() => 3),
    level: 0.95,
    simultaneous: true,
    method: "test",
    regions: [],
    resolvable_pct: RPM.map(() => 2),
    drift_pct_per_run: 0,
    twins,
    times_difference: {
      "80-120": { a_s: 4, b_s: 3.95, difference_s: -0.05, half_width_s: 0.06, n_a: 6, n_b: 6 },
    },
    ...changes,
  };
}

const SMOOTHNESS = {
  rpm: RPM,
  deviation_pct: RPM.map(() => 0.4),
  half_width_pct: RPM.map(() => 0.7),
};
const SMOOTH = { n: 6, basis: "day" as const, rpm: [], engine_kw: [], engine_nm: [], peak: null };

function evidence(changes: Partial<DeltaResult> = {}, over: Partial<GateEvidence> = {}): GateEvidence {
  const list = over.runs ?? runs();
  const result: CampaignResult = {
    analysis_version: "test",
    runs: list.map((run) => ({
      id: run.id,
      usable: true,
      reasons: [],
      notes: [],
      segments: { pull: { from_s: 2, to_s: 24 } },
      full_load: fullLoad(),
      factor: { id: "j1349_eta85", value: 0.98, in_range: true, applied: true, why: "" },
    })),
    sides: { B: { ...SMOOTH, smoothness: SMOOTHNESS } },
    delta: delta(changes),
  };
  const vehicle = { redlineRpm: 6500, engine: "spark ignition", aspiration: "turbo" } as const;
  return { result, runs: list, ...vehicle, calibration: calibration(), ...over };
}

const results = (e: GateEvidence) => new Map(evaluateGates(startingPlan(), e).map((r) => [r.id, r]));
const one = (gate: Gate, e: GateEvidence) => evaluateGates({ plan: 1, gates: [gate] }, e)[0];
const stateOf = (id: string, e: GateEvidence): GateState | undefined => results(e).get(id)?.state;

const NO_LOSS: Gate = { id: "n", kind: "no_loss", level: "must", fromRpm: null, toRpm: null, beyondPct: 1 };
const GAIN: Gate = { id: "g", kind: "gain", level: "must", fromRpm: 2500, toRpm: 4500, atLeastPct: 2 };
const band = (low: number, high: number, at?: [number, number, number, number]) => ({
  low_pct: RPM.map((n) => (at && n >= at[0] && n <= at[1] ? at[2] : low)),
  high_pct: RPM.map((n) => (at && n >= at[0] && n <= at[1] ? at[3] : high)),
});

describe("Starting plan", () => {
  it("is met by a good campaign, but for what the runs don't cover; what is off is left out", () => {
    const all = [...results(evidence()).values()];
    expect(all.filter((r) => r.state !== "met").map((r) => r.id)).toEqual(["sprint.100-200"]);
    expect(all.map((r) => r.id)).not.toContain("gain");
    for (const r of all) {
      expect(r.why).toMatch(/[.)]$/);
      expect(r.next === null).toBe(r.state === "met" || r.state === "does_not_apply");
    }
  });

  it("without a comparison everything is too little, nothing is met", () => {
    const states = new Set(
      [...results(evidence({}, { result: null, calibration: null })).values()].map((r) => r.state),
    );
    expect(states).toEqual(new Set(["too_little"]));
  });
});

describe("Decision rule on the band", () => {
  it.each<[string, Partial<DeltaResult>, GateState]>([
    ["whole band above −1 %", band(-0.9, 2), "met"],
    ["band reaches −1.1 % somewhere", band(-0.9, 2, [3000, 3100, -1.1, 2]), "too_little"],
    ["whole band below −1 % at one speed", band(-0.9, 2, [3000, 3000, -3, -1.1]), "not_met"],
    ["loss below the region: 500 above the start of the pull", band(-0.9, 2, [1700, 2150, -5, -3]), "met"],
    ["loss above the region: 300 below the limiter", band(-0.9, 2, [6250, 6300, -5, -3]), "met"],
    ["loss at the region's own ends", band(-0.9, 2, [2200, 2200, -5, -3]), "not_met"],
  ])("no loss: %s", (_, changes, state) => {
    expect(one(NO_LOSS, evidence(changes)).state).toBe(state);
  });

  it("names its region in the title", () => {
    expect(one(NO_LOSS, evidence()).title).toBe("No loss beyond 1 %, 2,200 to 6,200 per minute");
  });

  it.each<[string, Partial<DeltaResult>, GateState]>([
    ["whole band above 2 %", band(2.1, 6), "met"],
    ["band touches less", band(1.9, 6), "too_little"],
    ["whole band below 2 % somewhere in the region", band(2.1, 6, [4000, 4100, 0, 1.9]), "not_met"],
    ["small only outside the region", band(2.1, 6, [5000, 6000, -1, 1]), "met"],
  ])("gain: %s", (_, changes, state) => {
    expect(one(GAIN, evidence(changes)).state).toBe(state);
  });

  it("is too little where there is no band, no simultaneous one, or pulls that don't reach", () => {
    const gap = band(0, 2);
    expect(
      one(NO_LOSS, evidence({ ...gap, low_pct: gap.low_pct.map((x, k) => (RPM[k] === 4000 ? null : x)) }))
        .state,
    ).toBe("too_little");
    expect(
      one(
        NO_LOSS,
        evidence({ simultaneous: false, low_pct: RPM.map(() => null), high_pct: RPM.map(() => null) }),
      ).state,
    ).toBe("too_little");
    const short = RPM.filter((n) => n < 5000);
    const cut = evidence({ rpm: short, low_pct: short.map(() => 0), high_pct: short.map(() => 2) });
    expect(one(NO_LOSS, cut).state).toBe("too_little");
    expect(one(NO_LOSS, cut).why).toContain("only");
  });

  it("is too little where engine speeds inside the region were not compared at all", () => {
    const holed = RPM.filter((n) => n < 3500 || n > 4000);
    const changes = { rpm: holed, low_pct: holed.map(() => 0), high_pct: holed.map(() => 2) };
    const found = one(NO_LOSS, evidence(changes));
    expect(found.state).toBe("too_little");
    expect(found.why).toContain("3,450 to 4,050 per minute");
  });
});

describe("Sprint", () => {
  const times = (difference_s: number, half_width_s: number | null) => ({
    times_difference: {
      "80-120": { a_s: 4, b_s: 4 + difference_s, difference_s, half_width_s, n_a: 6, n_b: 6 },
    },
  });
  it.each<[number, number | null, GateState]>([
    [0.02, 0.07, "met"],
    [0.02, 0.09, "too_little"],
    [0.2, 0.09, "not_met"],
    [0.0, null, "too_little"],
  ])("difference %d ± %d s", (difference, half, state) => {
    expect(stateOf("sprint.80-120", evidence(times(difference, half)))).toBe(state);
  });
});

describe("Evidence and conditions", () => {
  const changed = (change: (run: EvidenceRun) => Partial<EvidenceRun>, order?: string) =>
    evidence({}, { runs: runs(order).map((run) => ({ ...run, ...change(run) })) });

  it("asks for closed twins on both sides", () => {
    const twins = delta().twins.filter((twin) => twin.side === "A" || twin.out !== "B1o");
    const got = results(evidence({ twins })).get("evidence.twins");
    expect(got?.state).toBe("too_little");
    expect(got?.next).toContain("1 more on side B");
    expect(
      stateOf("evidence.twins", evidence({ twins: delta().twins.map((t) => ({ ...t, closure_pct: null })) })),
    ).toBe("too_little");
  });

  it.each<[string, GateState]>([
    ["ABBABAABABBA", "met"],
    ["AABBBBAAAABB", "met"],
    ["ABBABAAB", "met"],
    ["AAAAAABBBBBB", "not_met"],
    ["ABABABABABAB", "not_met"],
    ["AB", "too_little"],
  ])("order %s is %s", (order, state) => {
    expect(stateOf("evidence.order", evidence({}, { runs: runs(order) }))).toBe(state);
  });

  it("does not take a day with one side only for counterbalanced", () => {
    const split = changed((run) => ({ roadDay: run.side === "A" ? "d1" : "d2" }));
    expect(stateOf("evidence.order", split)).toBe("not_met");
    expect(stateOf("evidence.days", split)).toBe("met");
  });

  it.each<[string, (run: EvidenceRun) => Partial<EvidenceRun>, GateState]>([
    ["conditions.temperature", (run) => ({ tempC: run.side === "A" ? 18 : 23 }), "met"],
    ["conditions.temperature", (run) => ({ tempC: run.side === "A" ? 18 : 23.2 }), "not_met"],
    ["conditions.temperature", (run) => ({ tempC: run.id === "r3" ? null : 18 }), "too_little"],
    ["conditions.pressure", (run) => ({ pressureHpa: run.side === "A" ? 1003 : 1014 }), "not_met"],
    ["conditions.mass", (run) => ({ massKg: run.side === "A" ? 1486 : 1502 }), "not_met"],
    ["conditions.mass", (run) => ({ massKg: run.side === "A" ? 1486 : 1500 }), "met"],
    ["conditions.tyres", (run) => ({ tyreFrontKpa: run.side === "A" ? 240 : 250 }), "met"],
    ["conditions.tyres", (run) => ({ tyreFrontKpa: run.side === "A" ? 240 : 250.5 }), "not_met"],
    ["conditions.tyres", (run) => ({ tyreRearKpa: run.side === "A" ? 230 : 219 }), "not_met"],
    ["conditions.tyres", () => ({ tyreRearKpa: null }), "too_little"],
    [
      "conditions.tyres",
      (run) => ({ tyreFrontKpa: null, tyreRearKpa: run.side === "A" ? 1 : 99 }),
      "not_met",
    ],
    ["conditions.fuel", (run) => ({ fuel: run.side === "A" ? " 98  Octane, batch 7" : run.fuel }), "met"],
    ["conditions.fuel", (run) => ({ fuel: run.side === "A" ? "98 octane, batch 8" : run.fuel }), "not_met"],
    ["conditions.fuel", (run) => ({ fuel: run.id === "r5" ? " " : run.fuel }), "too_little"],
    ["conditions.fuel", () => ({ fuel: null }), "too_little"],
    ["conditions.gear", (run) => ({ gear: run.id === "r2" ? 4 : 3 }), "not_met"],
    ["conditions.gear", () => ({ gear: null }), "too_little"],
  ])("%s", (id, change, state) => expect(stateOf(id, changed(change))).toBe(state));

  it("looks at usable pulls only", () => {
    const e = changed((run) => ({ gear: run.id === "r2" ? 4 : 3 }));
    const result = e.result && {
      ...e.result,
      runs: e.result.runs.map((run) => ({ ...run, usable: run.id !== "r2" })),
    };
    expect(stateOf("conditions.gear", { ...e, result })).toBe("met");
  });

  it("judges the weather factor: in range, outside, not known, none", () => {
    const factor = (change: object) => {
      const e = evidence();
      const result = e.result && {
        ...e.result,
        runs: e.result.runs.map((run, k) => ({
          ...run,
          factor: run.factor && (k === 2 ? { ...run.factor, ...change } : run.factor),
        })),
      };
      return stateOf("conditions.factor", { ...e, result });
    };
    expect(factor({})).toBe("met");
    expect(factor({ in_range: false, why: "Outside." })).toBe("not_met");
    expect(factor({ value: null, in_range: null })).toBe("too_little");
    const none = evidence();
    const result = none.result && {
      ...none.result,
      runs: none.result.runs.map((run) => ({
        ...run,
        factor: { id: "none" as const, value: null, in_range: null, applied: false, why: "Boosted." },
      })),
    };
    expect(stateOf("conditions.factor", { ...none, result })).toBe("does_not_apply");
  });

  it("judges the widest twin", () => {
    const twins = delta().twins.map((twin) => (twin.out === "B2o" ? { ...twin, closure_pct: -2.1 } : twin));
    const got = results(evidence({ twins })).get("conditions.closure");
    expect(got?.state).toBe("not_met");
    expect(got?.why).toContain("B2o");
  });
});

describe("Figures in sentences", () => {
  it.each([
    [6200, 0, "6,200"],
    [1234567.5, 1, "1,234,567.5"],
    [-0.04, 1, "0"],
    [-1.25, 2, "−1.25"],
    [2, 1, "2"],
  ])("%d with %d decimals", (value, digits, text) => expect(figure(value, digits)).toBe(text));
});
