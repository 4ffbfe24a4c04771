import { describe, expect, it } from "vitest";
import type { CharacteristicChange } from "@/lib/calibration/changes/types";
import { largestStep } from "@/lib/gates/calibration/table-steps";
import { evaluateGates } from "@/lib/gates/evaluate-gates";
import type { CalibrationEvidence } from "@/lib/gates/evidence";
import type { Gate, StepLimitGate } from "@/lib/gates/plan";
import {
  calibration,
  change,
  changeSet,
  IDENTICAL,
  side,
  UNCOVERED,
  withCalibration,
} from "@/tests/support/change-set-sample";

const gate = (over: Partial<StepLimitGate>): Gate => ({
  ...{ id: "s", kind: "step_limit", level: "must", scope: [], measure: "unit", against: "standing" },
  ...{ maxNeighbourStep: null, movedAtMost: null, ...over },
});
const ask = (asked: Gate, known: Partial<CalibrationEvidence>) =>
  evaluateGates({ plan: 1, gates: [asked] }, withCalibration(calibration(known)))[0];
const of = (...changes: CharacteristicChange[]) => ({ fromStanding: changeSet(changes) });

const X = [1000, 2000, 3000];
const Y = [50, 100];
/** Span before 10 to 20; one cell moves by 3 and then lies 9 above its neighbour along y, 5 and 1 off those along x. */
const map = change("spark", side([10, 12, 14, 16, 18, 20], X, Y), side([10, 12, 14, 16, 21, 20], X, Y), {
  functions: ["Ignition"],
});

describe("Moves", () => {
  it("names cell, axis values and sizes of the worst", () => {
    expect(ask(gate({ movedAtMost: 3 }), of(map))).toMatchObject({
      state: "met",
      why: "spark moves most at cell [1, 1] at 2,000 1/min, 100 kPa: 18 to 21 °; 3 is allowed.",
    });
    expect(ask(gate({ movedAtMost: 2.9 }), of(map)).state).toBe("not_met");
    // 3 of a span of 10.
    const share = ask(gate({ movedAtMost: 29, measure: "share" }), of(map));
    expect(share).toMatchObject({ state: "not_met", why: expect.stringContaining("21 °, 30 % of the span") });
    expect(ask(gate({ movedAtMost: 30, measure: "share" }), of(map)).state).toBe("met");
  });

  it("does not mistake the rounding of decimals for a move", () => {
    const tenth = change("idle", side([14.2]), side([14.3]));
    expect(14.3 - 14.2).toBeGreaterThan(0.1);
    expect(ask(gate({ movedAtMost: 0.1 }), of(tenth)).state).toBe("met");
  });

  it("refers a share to the value's own size where all are alike, and to nothing where that is zero", () => {
    const value = change("limit", side([6400]), side([6500]));
    expect(ask(gate({ movedAtMost: 1.5, measure: "share" }), of(value)).state).toBe("not_met");
    expect(ask(gate({ movedAtMost: 1.6, measure: "share" }), of(value)).state).toBe("met");
    const zero = change("offset", side([0]), side([1]));
    expect(ask(gate({ movedAtMost: 50, measure: "share" }), of(zero))).toMatchObject({
      state: "too_little",
      why: expect.stringContaining("offset was 0 before"),
    });
    expect(ask(gate({ movedAtMost: 1 }), of(zero)).state).toBe("met");
  });

  it("keeps what can't be told open, but a cell beyond speaks", () => {
    const added = change("new", null, side([1]), { kind: "added" });
    const shape = change("grown", side([1, 2], [1, 2]), side([1, 2, 3], X), { shapeChanged: true });
    const moved = change("shifted", side([1, 2], [1, 2]), side([1, 2], [1, 3]), { axisChanged: true });
    const hollow = change("hollow", side([1]), side([null]));
    const otherUnit = change("kelvin", side([10]), side([283.15]), { largestRise: null });
    const unlisted = { ...change("huge", side([1]), side([2])), before: null, after: null, changes: [] };
    for (const open of [added, shape, moved, hollow, otherUnit, unlisted]) {
      const got = ask(gate({ movedAtMost: 500 }), of(open));
      expect(got.state).toBe("too_little");
      expect(got.why).toContain(open.name);
    }
    expect(ask(gate({ movedAtMost: 2 }), of(map, added)).state).toBe("not_met");
    const partly = change("partly", side([1, 2, 3], X), side([null, 2, 30], X));
    expect(ask(gate({ movedAtMost: 20 }), of(partly)).state).toBe("not_met");
    expect(ask(gate({ maxNeighbourStep: 20 }), of(partly)).state).toBe("not_met");
    expect(ask(gate({ maxNeighbourStep: 30 }), of(partly)).state).toBe("too_little");
  });

  it("leaves words out", () => {
    const word = change("mode", side(["on"]), side(["off"]));
    expect(ask(gate({ movedAtMost: 1 }), of(word))).toMatchObject({
      state: "met",
      why: "1 changed characteristic has nothing to hold against this limit.",
    });
    expect(ask(gate({ movedAtMost: 3 }), of(map, word)).why).toMatch(/Words have no size: mode\.$/);
  });
});

describe("Steps between neighbours", () => {
  it("looks along every axis at what changed, of the side after", () => {
    expect(largestStep(map)).toMatchObject({ size: 9, index: [1, 0], next: [1, 1], from: 12, to: 21 });
    expect(ask(gate({ maxNeighbourStep: 9 }), of(map))).toMatchObject({
      state: "met",
      why: "spark steps most from cell [1, 0] at 2,000 1/min, 50 kPa to [1, 1] at 2,000 1/min, 100 kPa: 12 to 21 °; 9 is allowed.",
    });
    expect(ask(gate({ maxNeighbourStep: 8.9 }), of(map)).state).toBe("not_met");
    expect(ask(gate({ maxNeighbourStep: 89, measure: "share" }), of(map)).state).toBe("not_met");
    expect(ask(gate({ maxNeighbourStep: 90, measure: "share" }), of(map)).state).toBe("met");
  });

  it("does not take the end of a row and the start of the next for neighbours", () => {
    const rows = change("rows", side([1, 2, 3, 1, 2, 3], X, Y), side([1, 2, 9, 0, 2, 9], X, Y));
    // 9 to 0 follow each other in memory only; the steps are 7 and 2 along x, 1 and 0 along y.
    expect(largestStep(rows)?.size).toBe(7);
  });

  it("does not hold against a change what stood there before", () => {
    const far = change("far", side([0, 50, 51, 52], [1, 2, 3, 4]), side([0, 50, 51, 53], [1, 2, 3, 4]));
    expect(largestStep(far)?.size).toBe(2);
    const shifted = change("axis", side([0, 50, 51], X), side([0, 50, 51], [900, 2000, 3000]), {
      axisChanged: true,
    });
    expect(largestStep(shifted)?.size).toBe(50);
  });

  it("asks nothing of blocks and single values", () => {
    expect(largestStep(change("block", side([1, 2]), side([1, 90])))).toBeNull();
    expect(largestStep(change("value", side([1]), side([90])))).toBeNull();
  });
});

describe("Scope", () => {
  const asked = (scope: string[]) => ask(gate({ movedAtMost: 1, scope }), of(map));
  it("holds tables by name and by function", () => {
    expect(asked(["spark"]).state).toBe("not_met");
    expect(asked(["Ignition"]).state).toBe("not_met");
    expect(asked(["fuel"])).toMatchObject({ state: "met", why: "Nothing of fuel changed." });
  });

  it("has too little where a cell was a word and is a number now, or the other way round", () => {
    for (const [from, to] of [
      ["defect", 200],
      [200, "defect"],
    ] as const) {
      const state = change("sensor", side([from]), side([to]));
      expect(ask(gate({ movedAtMost: 1 }), of(state))).toMatchObject({
        state: "too_little",
        why: expect.stringContaining("sensor has changed cells that are a number on one side"),
      });
    }
    expect(ask(gate({ movedAtMost: 1 }), of(change("mode", side(["off"]), side(["on"])))).state).toBe("met");
  });

  it("asks the parent where the plan says so", () => {
    const known = { fromStanding: changeSet([map]), fromParent: IDENTICAL };
    expect(ask(gate({ movedAtMost: 1, against: "parent" }), known).state).toBe("met");
    expect(ask(gate({ movedAtMost: 1, against: "parent" }), { fromParent: null }).state).toBe("too_little");
  });

  it("has too little where a table could not be read and undescribed bytes changed", () => {
    const hidden = changeSet([], { ...UNCOVERED, notRead: [{ name: "fuel", reason: "no layout" }] });
    const ofMixture = [{ name: "fuel", reason: "no layout", sets: ["Mixture"] }];
    const inSet = changeSet([], { ...UNCOVERED, notRead: ofMixture });
    const scoped = (scope: string) =>
      ask(gate({ movedAtMost: 1, scope: [scope] }), { fromStanding: inSet }).state;
    expect([scoped("Mixture"), scoped("Ignition")]).toEqual(["too_little", "met"]);
    const got = ask(gate({ movedAtMost: 1, scope: ["fuel"] }), { fromStanding: hidden });
    expect(got).toMatchObject({
      state: "too_little",
      why: expect.stringContaining("fuel could not be read"),
    });
    expect(ask(gate({ movedAtMost: 1, scope: ["spark"] }), { fromStanding: hidden }).state).toBe("met");
    const bytes = changeSet([], { readBy: "none", ...UNCOVERED });
    expect(ask(gate({ movedAtMost: 1 }), { fromStanding: bytes }).state).toBe("too_little");
  });
});
