import { describe, expect, it } from "vitest";
import type { RelevanceMark } from "@/lib/calibration/changes/relevance";
import { touchedMarks } from "@/lib/calibration/changes/relevance";
import type { RegionResult } from "@/lib/calibration/image/checksum-regions";
import { evaluateGates } from "@/lib/gates/evaluate-gates";
import type { CalibrationEvidence } from "@/lib/gates/evidence";
import type { Gate } from "@/lib/gates/plan";
import { gatesNotIn, startingPlan } from "@/lib/gates/starting-plan";
import { gatePlanSchema } from "@/lib/services/gate-plans/schema";
import {
  calibration,
  change,
  changeSet,
  coverage,
  IDENTICAL,
  side,
  UNCOVERED,
  withCalibration,
} from "@/tests/support/change-set-sample";

const ask = (gate: Gate, known: Partial<CalibrationEvidence> | null) =>
  evaluateGates({ plan: 1, gates: [gate] }, withCalibration(known && calibration(known)))[0];

const ignition = change("ignition", side([1]), side([2]), { functions: ["Spark"], groups: ["All"] });
const boost = change("boost", side([1]), side([2]), { functions: ["Air"] });
const of = (...changes: (typeof ignition)[]) => ({ fromStanding: changeSet(changes) });
const bytesOnly = { fromStanding: changeSet([], { readBy: "none", ...UNCOVERED }) };

describe("Touched", () => {
  const gate = (allowed: string[] | null, uncovered = false): Gate => ({
    ...{ id: "t", kind: "touched", level: "must", uncovered },
    allowed: allowed && { functions: allowed, characteristics: [] },
  });

  it("allows anything described unless something is named", () => {
    expect(ask(gate(null), of(ignition, boost)).state).toBe("met");
    expect(ask(gate(["Spark", "Air"]), of(ignition, boost)).state).toBe("met");
    expect(ask(gate(["All"]), of(ignition)).state).toBe("met");
    const one: Gate = { ...gate(null), allowed: { functions: [], characteristics: ["boost"] } } as Gate;
    expect(ask(one, of(boost)).state).toBe("met");
  });

  it("names what changed beyond the plan", () => {
    const got = ask(gate(["Spark"]), of(ignition, boost));
    expect(got).toMatchObject({
      state: "not_met",
      title: "Only Spark changed, no byte outside the description",
      why: "1 characteristic changed that the plan does not name: boost.",
    });
    const added = change("new", null, side([1]), { kind: "added" });
    expect(ask(gate(["Spark"]), of(ignition, added)).state).toBe("not_met");
  });

  it("says where bytes outside the description differ, and lets the plan allow them", () => {
    const known = { fromStanding: changeSet([ignition], UNCOVERED) };
    expect(ask(gate(null), known)).toMatchObject({
      state: "not_met",
      why: "4 bytes differ in 1 place outside the description, the first at 0x816000 in DATA_1.",
    });
    expect(ask(gate(["Spark"], true), known).state).toBe("met");
    expect(ask(gate(["Air"], true), known).state).toBe("not_met");
    const odd = ask(gate(null), { fromStanding: changeSet([ignition], { problems: ["The EPK differs."] }) });
    expect(odd).toMatchObject({ state: "met", why: expect.stringContaining("Read the problem named") });
    const unread = changeSet([], { ...UNCOVERED, notRead: [{ name: "odd", reason: "no layout" }] });
    expect(ask(gate(null), { fromStanding: unread }).why).toContain("1 characteristic could not be read");
  });

  it("has too little without a change set or without a description, unless no byte differs", () => {
    expect(ask(gate(null), null).state).toBe("too_little");
    expect(ask(gate(null), { fromStanding: null }).why).toContain("not computed yet");
    expect(ask(gate(null), bytesOnly).why).toContain("Neither revision has a description");
    expect(ask(gate(null), { fromStanding: { ...IDENTICAL, readBy: "none" } }).state).toBe("met");
  });
});

describe("Coverage", () => {
  const gate: Gate = { id: "c", kind: "coverage", level: "should", atLeastPct: 80 };
  const untold = (cells: number) => ({
    notTold: [{ name: "lambda", changedCells: cells, code: "no_link" as const, reason: "No link for load." }],
  });

  it.each([
    [8, "met"],
    [7, "not_met"],
  ])("%d of 10 cells", (changedVisited, state) => {
    const got = ask(gate, { coverage: coverage({ changedVisited }) });
    expect(got.state).toBe(state);
    expect(got.why).toContain(`2 usable runs visited ${changedVisited} of 10 changed cells`);
  });

  it("counts what can't be told as not visited, and says too little only where that decides", () => {
    const open = ask(gate, { coverage: coverage({ changedVisited: 7, ...untold(3) }) });
    expect(open.state).toBe("too_little");
    expect(open.why).toContain("3 cells can't be told and count as not visited: No link for load.");
    expect(ask(gate, { coverage: coverage({ changedVisited: 5, ...untold(2) }) }).state).toBe("not_met");
  });

  it("names the table that lacks most, and leaves out what has no axes", () => {
    const map = (name: string, never: number[]) => ({
      ...{ name, dims: [4], secondsByCell: [], visitsByCell: [], secondsOutside: 0 },
      ...{ changedCells: 4, changedVisited: 4 - never.length, changedNeverVisited: never, links: [] },
    });
    const value = { name: "idle", changedCells: 1, code: "no_axes" as const, reason: "" };
    const known = coverage({
      changedVisited: 6,
      maps: [map("a", [1]), map("b", [0, 1, 2])],
      notTold: [value],
    });
    const got = ask(gate, { coverage: known });
    expect(got.why).toContain("Most are missing in b: 3 of 4.");
    expect(got.why).toContain("Without axes, so left out: idle.");
    const alone = coverage({ changedCells: 0, changedVisited: 0, notTold: [value] });
    expect(ask(gate, { coverage: alone }).state).toBe("does_not_apply");
  });

  it("waits for runs and for the computing, and has nothing to say of equal images", () => {
    expect(ask(gate, { coverageState: "no_runs", coverage: null }).why).toContain("no usable run");
    // Also what failed is "computing" to a gate: the way out must hold for it too.
    expect(ask(gate, { coverageState: "computing", coverage: null })).toMatchObject({
      state: "too_little",
      next: expect.stringContaining("can be asked for"),
    });
    expect(ask(gate, { fromStanding: IDENTICAL }).state).toBe("does_not_apply");
    expect(ask(gate, bytesOnly).state).toBe("too_little");
  });
});

describe("Integrity", () => {
  const gate: Gate = { id: "i", kind: "integrity", level: "must" };
  const region = (state: RegionResult["state"]): RegionResult => ({
    ...{ name: "main", state, found: null, expected: null, sentence: `Region "main" is ${state}.` },
  });
  const given = (fingerprintHolds: boolean | null, regions: RegionResult[] | null) =>
    ask(gate, { integrity: { fingerprintHolds, regions } });

  it("holds fingerprint and every region", () => {
    expect(given(true, [region("holds")])).toMatchObject({
      state: "met",
      why: "The fingerprint holds, and so does 1 checksum region: main.",
    });
    expect(given(true, []).why).toContain("No checksum region is declared");
    expect(given(true, [region("holds"), region("broken")])).toMatchObject({
      state: "not_met",
      why: 'Region "main" is broken.',
    });
    expect(given(true, [region("not_there")]).state).toBe("too_little");
    expect(given(false, []).state).toBe("not_met");
    expect(given(null, []).state).toBe("too_little");
    expect(given(true, null).state).toBe("too_little");
  });
});

describe("Declaration", () => {
  const gate: Gate = { id: "d", kind: "declaration", level: "must" };
  const mark = (set: RelevanceMark["set"], name: string): RelevanceMark => ({
    ...{ set, name, relevance: "emission", note: "" },
  });
  const said = (declaresTouch: boolean | null, marks: RelevanceMark[], changes = changeSet([ignition])) =>
    ask(gate, { declaresTouch, marks, fromStanding: changes });

  it("is contradicted by a touched mark, by function, group or name", () => {
    for (const touched of [
      mark("function", "Spark"),
      mark("function", "All"),
      mark("characteristic", "ignition"),
    ])
      expect(said(false, [touched]).state).toBe("not_met");
    expect(said(false, [mark("function", "Spark")]).why).toBe(
      "The revision says no. It touches Spark (emission) by ignition.",
    );
    expect(said(true, [mark("function", "Spark")]).state).toBe("met");
    expect(said(false, [mark("function", "Air"), mark("characteristic", "Spark")]).state).toBe("met");
    expect(touchedMarks(changeSet([boost]), [mark("function", "Spark")])).toEqual([]);
  });

  it("has too little without an answer, and where a no can't be shown", () => {
    expect(said(null, []).state).toBe("too_little");
    const marks = [mark("function", "Air")];
    expect(said(false, marks, changeSet([ignition], UNCOVERED)).state).toBe("too_little");
    expect(said(false, marks, bytesOnly.fromStanding).state).toBe("too_little");
    expect(said(false, marks, IDENTICAL).state).toBe("met");
  });

  it("says so where nobody has marked anything", () => {
    expect(said(false, [])).toMatchObject({
      state: "met",
      why: expect.stringContaining("Nobody has marked"),
    });
  });
});

const CALIBRATION_IDS = ["touched", "step_limit", "coverage", "integrity", "declaration"];

describe("A plan with them", () => {
  const plan = (gate: object) => gatePlanSchema.safeParse({ plan: 1, gates: [gate] });
  const touched = { id: "t", kind: "touched", level: "must", uncovered: false };
  const steps = { id: "s", kind: "step_limit", level: "must", measure: "share", against: "parent" };

  it("takes names as a form types them, and nothing named as anything described", () => {
    const typed = plan({ ...touched, allowed: { functions: "Spark\nAir, Air", characteristics: " " } });
    expect(typed.data?.gates[0]).toMatchObject({
      allowed: { functions: ["Spark", "Air"], characteristics: [] },
    });
    const none = plan({ ...touched, allowed: { functions: "", characteristics: "" } });
    expect(none.data?.gates[0]).toMatchObject({ allowed: null });
    expect(gatePlanSchema.parse(startingPlan())).toEqual(startingPlan());
  });

  it("refuses a gate that asks nothing", () => {
    expect(plan({ ...touched, allowed: null, uncovered: true }).success).toBe(false);
    expect(plan({ ...touched, allowed: null, uncovered: true, level: "off" }).success).toBe(true);
    const limits = { maxNeighbourStep: "", movedAtMost: "3" };
    expect(plan({ ...steps, scope: "", ...limits }).success).toBe(true);
    expect(plan({ ...steps, scope: "", ...limits, movedAtMost: "" }).success).toBe(false);
    const own = plan({ ...steps, scope: "", ...limits, measure: "unit" });
    expect(own.error?.issues[0]).toMatchObject({ path: ["gates", 0, "scope"] });
    expect(plan({ ...steps, scope: "ignition", ...limits, measure: "unit" }).success).toBe(true);
  });

  it("stays valid without them, and offers them switched off", () => {
    const gates = startingPlan().gates.filter(({ kind }) => kind === "evidence");
    const older = gatePlanSchema.parse({ plan: 1, gates });
    expect(evaluateGates(older, withCalibration(calibration())).map(({ kind }) => kind)).not.toContain(
      "touched",
    );
    const offered = gatesNotIn(older).filter(({ id }) => CALIBRATION_IDS.includes(id));
    expect(offered.map(({ id }) => id)).toEqual(CALIBRATION_IDS);
    expect(offered.every(({ level }) => level === "off")).toBe(true);
  });
});
