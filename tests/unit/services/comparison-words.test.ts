import Papa from "papaparse";
import { describe, expect, test } from "vitest";
import { answerSentences } from "@/components/features/comparisons/answer-line";
import { viewFromParameters, viewToParameters } from "@/components/features/comparisons/figure-view";
import type { ComparisonInput } from "@/db/schema/comparisons";
import { canonicalJson } from "@/lib/canonical-json";
import type { PlottedGrid } from "@/lib/compare/plotted-grid";
import type { CampaignResult, DeltaResult } from "@/lib/measure/types";
import { gridCsv } from "@/lib/services/comparisons/export-csv";
import { whatMoved } from "@/lib/services/comparisons/what-moved";
import { retryLost, sqlState } from "@/lib/services/decisions/retry";
import { namesRevision } from "@/lib/services/decisions/schema";

const run = (number: number, fields: Record<string, unknown> = {}) => ({
  runId: `run-${number}`,
  number,
  side: "A" as const,
  logSha256: "0".repeat(64),
  leg: "out",
  order: number,
  kind: "pull",
  roadDayId: "day",
  fields: canonicalJson({ gear: 3, temperature: 17, ...fields }),
});

const input = (runs: ComparisonInput["runs"], parts: Partial<ComparisonInput> = {}): ComparisonInput => ({
  analysisVersion: "1",
  sheetVersion: 1,
  settings: { factor: "auto", rpm_step: 50, level: 0.95, seed: 1 },
  runs,
  ...parts,
});

describe("what moved", () => {
  test("is nothing between equal inputs", () => {
    expect(whatMoved(input([run(1)]), input([run(1)]), [])).toEqual([]);
  });

  test("names runs that came, went and changed, the sheet and the analysis", () => {
    const before = input([run(1), run(2), run(3)]);
    const after = input([run(1), { ...run(3, { gear: 4, temperature: 21 }), leg: "back" }, run(7), run(8)], {
      sheetVersion: 3,
      analysisVersion: "2",
    });
    const setAside = [{ id: "run-2", setAsideAt: new Date() }];
    expect(whatMoved(before, after, setAside)).toEqual([
      "Runs 7 and 8 count now and did not then.",
      "Run 2 was set aside.",
      "Run 3 was changed: leg, gear and temperature.",
      "The vehicle sheet went from version 1 to 3.",
      "The analysis went from version 1 to version 2.",
    ]);
  });
});

describe("the answer in words", () => {
  const delta = (parts: Partial<DeltaResult>): DeltaResult => ({
    quantity: "engine_nm",
    basis: "day",
    rpm: [2000, 3000],
    pct: [1, 1],
    low_pct: [0.5, 0.5],
    high_pct: [1.5, 1.5],
    abs_nm: [3, 3],
    level: 0.95,
    simultaneous: true,
    method: "m",
    regions: [],
    resolvable_pct: [0.6, 0.7],
    drift_pct_per_run: 0,
    twins: [],
    ...parts,
  });
  const labels = { a: "R1", b: "R2" };
  const n = { a: 5, b: 6 };

  test("names losses before gains", () => {
    const [first, second] = answerSentences(
      delta({
        regions: [
          { from_rpm: 2000, to_rpm: 2500, verdict: "gain" },
          { from_rpm: 2800, to_rpm: 3000, verdict: "loss" },
        ],
      }),
      labels,
      n,
    );
    expect(first).toMatch(/^Loss shown: R2 is below R1/);
    expect(second).toMatch(/^Gain shown: R2 is above R1/);
  });

  test("claims nothing without a band or inside it, and a peak only with its ±", () => {
    expect(answerSentences(delta({ low_pct: [null, null] }), labels, n)[0]).toMatch(
      /No difference is claimed/,
    );
    const words = answerSentences(
      delta({
        peak_difference: { engine_kw: 2.317, half_width_kw: 0.81, engine_nm: -1.2, half_width_nm: 2.4 },
      }),
      labels,
      n,
    ).join(" ");
    expect(words).toMatch(/Nothing shown/);
    // The last digit is worth about a third of the half-width: look.md 4.4.
    expect(words).toContain("+2.3 ± 0.8 kW");
    expect(words).toContain("\u22121.2 ± 2.4 N·m");
    expect(words).toContain("(n 5 for A, 6 for B)");
    expect(words.indexOf("peak torque")).toBeLessThan(words.indexOf("peak power"));
  });

  test.each([
    [null, 2.4],
    [0.81, null],
    [null, null],
  ])("says nothing of peaks with half-widths %s kW and %s N·m", (half_width_kw, half_width_nm) => {
    const peak_difference = { engine_kw: 2.317, half_width_kw, engine_nm: -1.2, half_width_nm };
    const words = answerSentences(delta({ peak_difference }), labels, n).join(" ");
    expect(words).not.toMatch(/peak|kW|N·m/i);
  });
});

test("a link carries the exact view and nothing that makes no sense", () => {
  const view = {
    quantityId: "torque",
    mode: "absolute" as const,
    range: { from: 2000, to: 4500 },
    everyRun: true,
  };
  const parameters = Object.fromEntries(new URLSearchParams(viewToParameters(view)));
  expect(viewFromParameters(parameters)).toEqual(view);
  expect(viewFromParameters({ quantity: "<b>", difference: "x", rpm: "9-1", runs: ["each"] })).toEqual({});
});

test("the grid as a file survives a spreadsheet: no cell is a formula, numbers stay numbers", () => {
  const row = (value: number | null) => ({ delta: [value], low: [value], high: [null] });
  const side = { n: 3, kw: [90.25], nm: [-3.1], runsKw: [], runsNm: [] };
  const grid: PlottedGrid = {
    rpm: [3000],
    basis: "day",
    a: side,
    b: side,
    pct: row(-3.1),
    nm: row(-1),
    kw: row(null),
    level: 0.95,
    simultaneous: true,
    regions: [],
  };
  const { data } = Papa.parse<string[]>(gridCsv(grid, { a: '=1+1","x', b: "@R2" }).trimEnd());
  expect(data).toHaveLength(2);
  const [header, cells] = data;
  expect(header.filter((title) => /^[=+\-@\t\r\n\0]/.test(title))).toEqual([]);
  expect(cells.slice(0, 7)).toEqual(["3000", "90.25", "90.25", "-3.1", "-3.1", "-3.1", "-3.1"]);
  expect(cells[7]).toBe("");
  // Engine channels with their unit, a difference of temperatures in K; a point off their grid is empty.
  const engine = (value: number) => ({ rpm: [3000], channels: { exhaust_temperature: { values: [value] } } });
  const result = {
    sides: { A: { full_load: engine(850) }, B: { full_load: engine(870) } },
    delta: { channels: { exhaust_temperature: { rpm: [3200], difference: [20], low: [18], high: [22] } } },
  } as unknown as CampaignResult;
  const wide = Papa.parse<string[]>(gridCsv(grid, { a: "R1", b: "R2" }, result).trimEnd()).data;
  expect(wide[0].slice(14)).toEqual([
    "exhaust temperature A R1 [°C]",
    "exhaust temperature B R2 [°C]",
    "exhaust temperature B minus A [K]",
    "exhaust temperature band low [K]",
    "exhaust temperature band high [K]",
  ]);
  expect(wide[1].slice(14)).toEqual(["850", "870", "", "", ""]);
});

describe("typed numbers", () => {
  test.each([
    ["R15", true],
    ["r15", true],
    [" 15 ", true],
    ["R1", false],
    ["15 ", true],
    ["R 15", false],
    ["", false],
  ])("%j names R15: %s", (typed, names) => {
    expect(namesRevision(typed, 15)).toBe(names);
  });
});

describe("a transaction that lost against another", () => {
  const lost = () => Object.assign(new Error("query"), { cause: { code: "40P01" } });

  test("is tried again, three times at most", async () => {
    let tries = 0;
    const answer = await retryLost(async () => {
      tries += 1;
      if (tries < 3) throw lost();
      return "done";
    });
    expect([answer, tries]).toEqual(["done", 3]);
    await expect(retryLost(() => Promise.reject(lost()))).rejects.toThrow("query");
  });

  test("is not tried again for any other reason", async () => {
    let tries = 0;
    const failing = retryLost(async () => {
      tries += 1;
      throw Object.assign(new Error("no"), { code: "23505" });
    });
    await expect(failing).rejects.toThrow("no");
    expect(tries).toBe(1);
    expect(sqlState(new Error("plain"))).toBeNull();
    expect(sqlState({ cause: { cause: { code: "23505" } } })).toBe("23505");
  });
});
