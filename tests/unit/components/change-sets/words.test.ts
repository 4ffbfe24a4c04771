import { describe, expect, it } from "vitest";
import { orderChanges } from "@/components/features/change-sets/list/change-order";
import { changeAddress, viewFromParameters } from "@/components/features/change-sets/list/view-address";
import {
  limitText,
  spreadText,
  structureText,
  summarySentence,
} from "@/components/features/change-sets/words/change-words";
import { coverageOf, visitedText } from "@/components/features/change-sets/words/coverage-words";
import { differenceText, digitsFor } from "@/components/features/change-sets/words/figure-text";
import { warningsOf } from "@/components/features/change-sets/words/warnings";
import { BYTES, CURVE, change, changeSet, MAP, side, VALUE, view } from "./sample";

describe("figures", () => {
  it("prints no difference as zero: more digits where the smallest change is finer, six at most", () => {
    expect([
      digitsFor([0.5, -2], 1),
      digitsFor([0.003, 0], 1),
      digitsFor([1e-9], 2),
      digitsFor([], 1),
    ]).toEqual([1, 3, 6, 1]);
  });

  it("signs a difference, says what is too small to see, and tells none of texts", () => {
    expect(differenceText(2, 1.5, 1)).toBe("\u22120.5");
    expect(differenceText(1, 1 + 1e-9, 6)).toBe("≈\u202f0");
    expect(differenceText("off", "on", 0)).toBeNull();
    expect(differenceText(null, 1, 0)).toBeNull();
  });
});

describe("the summary", () => {
  it("counts kinds, cells and bytes outside the description", () => {
    const set = changeSet({ uncovered: [BYTES], uncoveredRanges: 1, uncoveredBytes: 4 });
    expect(summarySentence(set, 2)).toBe(
      "1 map, 1 curve and 1 value differ from R2; 4 cells; 4 bytes outside the description.",
    );
  });

  it("counts no cells of a text", () => {
    const text = change("Label", side([], [], []), side([], [], []), { type: "ASCII", changed: 1 });
    expect(summarySentence(changeSet({ characteristics: [text] }), 2)).toBe(
      "1 text differs from R2; no byte outside the description.",
    );
    expect(summarySentence(changeSet({ characteristics: [VALUE, text] }), 2)).toContain("; 1 cell;");
  });

  it("keeps apart what only one description knows, and says when nothing described differs", () => {
    const added = change("New_Value", null, side([], [], [1]));
    expect(summarySentence(changeSet({ characteristics: [VALUE, added] }), 2)).toBe(
      "1 value differs from R2; 1 cell; 1 only in this revision's description; no byte outside the description.",
    );
    const bytes = changeSet({ characteristics: [], uncoveredBytes: 4, uncoveredRanges: 1 });
    expect(summarySentence(bytes, 2)).toBe(
      "No described value differs from R2; 4 bytes outside the description.",
    );
  });

  it("says what can be said without a description, and of equal content", () => {
    expect(
      summarySentence(
        changeSet({ readBy: "none", characteristics: [], changedBytes: 1, changedRanges: 1 }),
        2,
      ),
    ).toBe("1 byte in 1 place differs from R2; no description says what they mean.");
    expect(summarySentence(changeSet({ identical: true, characteristics: [] }), 2)).toBe(
      "The content is the same as R2: not one byte differs.",
    );
  });
});

describe("a change in words", () => {
  it("names the fall before the rise, with the unit", () => {
    expect(spreadText(MAP, 1)).toBe("\u22122.0 to +9.0\u202fkPa");
    expect(spreadText(CURVE, 2)).toBe("+0.02\u202f1");
    expect(spreadText(change("T", side([], [], ["a"]), side([], [], ["b"])), 0)).toBeNull();
  });

  it("counts what lies outside limits, and tells moved axes from a changed shape", () => {
    const limits = {
      ...MAP,
      changes: MAP.changes.map((cell, i) => ({
        ...cell,
        limit: i === 0 ? ("above" as const) : ("extended" as const),
      })),
    };
    expect(limitText(limits)).toBe(
      "1 above the limit and 1 outside the usual limits, inside the extended ones",
    );
    expect(limitText(MAP)).toBeNull();
    expect(structureText({ ...MAP, axisChanged: true })).toBe(
      "Axis points moved: the values hold at other places.",
    );
    expect(structureText({ ...MAP, shapeChanged: true, before: side([8, 6], [], []) })).toBe(
      "The shape changed from 8 × 6 to 3 × 2.",
    );
  });

  it("says how many changed cells no run visited, and why where that can't be told", () => {
    const table = {
      ...{ name: "Boost.Target", dims: [3, 2], secondsByCell: [], visitsByCell: [], secondsOutside: 0 },
      ...{ changedCells: 2, changedVisited: 1, changedNeverVisited: [4], links: [] },
    };
    const coverage = {
      ...{ coverage: 1 as const, runs: ["r"], maps: [table], changedCells: 2, changedVisited: 1 },
      notTold: [{ name: "Limit_Speed", changedCells: 1, code: "no_axes" as const, reason: "one value" }],
    };
    expect(visitedText(table)).toBe("1 of 2 changed cells never visited");
    expect(visitedText({ ...table, changedNeverVisited: [] })).toBe("all 2 changed cells visited");
    expect(coverageOf(coverage, "Limit_Speed")).toEqual({ table: null, reason: "one value" });
    expect(coverageOf(coverage, "Fuel.Lambda")).toBeNull();
  });
});

describe("the order", () => {
  it("lists by effect, or by function with the largest effect first and no function last", () => {
    const set = changeSet().characteristics;
    expect(orderChanges(set, "effect").map(({ changes }) => changes.map(({ name }) => name))).toEqual([
      ["Boost.Target", "Fuel.Lambda", "Limit_Speed"],
    ]);
    expect(orderChanges(set, "function").map(({ name }) => name)).toEqual(["Boost", "Fuel", null]);
    expect(orderChanges([], "effect")).toEqual([]);
  });
});

describe("the address", () => {
  it("carries the exact view there and back, and leaves out what makes no sense", () => {
    const asked = {
      change: "Table_A.b[0]",
      against: "22222222-2222-4222-8222-222222222222",
      order: "effect" as const,
    };
    const address = new URL(changeAddress("r", asked), "http://localhost");
    expect(address.hash).toBe("#change");
    expect(viewFromParameters(Object.fromEntries(address.searchParams))).toEqual({
      ...asked,
      side: "difference",
      plane: null,
    });
    expect(viewFromParameters({ plane: "1-0", show: "before" })).toMatchObject({
      plane: [1, 0],
      side: "before",
      change: null,
    });
    expect(viewFromParameters({ plane: "x", show: "all", order: ["effect"] })).toMatchObject({
      ...{ plane: null, side: "difference", order: "function" },
    });
  });
});

describe("warnings", () => {
  it("come gravest first and say what and where", () => {
    const warnings = warningsOf(
      view({
        changes: changeSet({
          uncovered: [BYTES],
          uncoveredRanges: 1,
          uncoveredBytes: 4,
          problems: ["Two of one name."],
        }),
        fingerprintHolds: false,
        contradiction: "R3 is declared not to touch anything, but Boost is marked.",
        epk: { state: "mismatch", expected: "V2", found: "V1" },
        integrity: [
          { name: "all", state: "broken", found: "01", expected: "02", sentence: "Found 01, stored 02." },
        ],
        marks: [{ set: "function", name: "Fuel", relevance: "emission", note: "Type approval." }],
      }),
    );
    expect(warnings.map(({ tone, title }) => `${tone}: ${title}`)).toEqual([
      "problem: The stored image is damaged",
      "problem: Checksum region all",
      "problem: Description and image do not belong together",
      "problem: The declaration is contradicted",
      "caution: Changed outside the description",
      "caution: Emission-relevant",
      "caution: While reading",
    ]);
    expect(warnings[5]?.text).toBe("Function Fuel is touched: Fuel.Lambda. Type approval.");
  });

  it("say nothing where all is well, and whose description was used where one side has none", () => {
    expect(warningsOf(view())).toEqual([]);
    const [checksum] = warningsOf(view({ checksumBytes: 4 }));
    expect(checksum).toEqual({
      tone: "plain",
      title: "The stored checksum changed with it",
      text: "4 bytes of declared checksum regions.",
    });
    const [first] = warningsOf(view({ changes: changeSet({ readBy: "b" }) }));
    expect(first).toMatchObject({ tone: "plain", title: "Read by the description of R3" });
  });
});
