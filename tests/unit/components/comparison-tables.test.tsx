import { cleanup, render, screen } from "@testing-library/react";
import { afterEach, describe, expect, it } from "vitest";
import { AnswerCard } from "@/components/features/comparisons/answer-card";
import { PeaksTable } from "@/components/features/comparisons/peaks-table";
import { RunsTable } from "@/components/features/comparisons/runs-table";
import { STALE_EVIDENCE } from "@/components/features/decisions/record-words";
import type { CampaignResult, DeltaResult, FactorResult } from "@/lib/measure/types";
import type { RunLine } from "@/lib/services/comparisons/schema";

afterEach(cleanup);

const factor: FactorResult = { id: "din70020", value: 0.98, in_range: null, applied: true, why: "" };

function resultOf(basis: "reference" | "day"): CampaignResult {
  const side = (engine_kw: number, uncertainty_kw: number | null) => ({
    ...{ n: 5, basis, rpm: [], engine_kw: [], engine_nm: [] },
    peak: { engine_kw, engine_kw_rpm: 6000, engine_nm: 320, engine_nm_rpm: 3500, uncertainty_kw },
  });
  return {
    analysis_version: "test",
    runs: [{ id: "1", usable: true, reasons: [], notes: [], factor }],
    sides: { A: side(184, 5.5), B: side(188, null) },
  };
}

describe("PeaksTable", () => {
  const labels = { a: "R1", b: "R2" };

  it.each([
    ["reference", /crank estimate, reference air by din70020/],
    ["day", /crank estimate, air of the day/],
  ] as const)("names the basis %s and what the peaks are", (basis, words) => {
    render(<PeaksTable result={resultOf(basis)} labels={labels} />);
    expect(screen.getByRole("table", { name: words })).toBeTruthy();
    expect(screen.getByText(/leg and order taken out and so need not equal/)).toBeTruthy();
  });

  it("gives each side its own ± or says that none is stated", () => {
    render(<PeaksTable result={resultOf("day")} labels={labels} />);
    const heads = screen.getAllByRole("columnheader").map((head) => head.textContent);
    expect(heads.slice(0, 2)).toEqual(["Quantity", "B \u2212 A"]);
    const [, , , a, b] = Array.from(screen.getByRole("row", { name: /Peak power/ }).children);
    expect(a?.textContent).toContain("184.0 ± 5.5");
    expect(b?.textContent).toContain("188.0 (± not stated)");
    const [, , , torque] = Array.from(screen.getByRole("row", { name: /Peak torque/ }).children);
    expect(torque?.textContent).toContain("320.0 (± not stated)");
  });
});

describe("AnswerCard", () => {
  const delta: DeltaResult = {
    ...{ quantity: "engine_nm", basis: "day", rpm: [], pct: [], low_pct: [], high_pct: [], abs_nm: [] },
    ...{ level: 0.95, simultaneous: true, method: "", regions: [], resolvable_pct: [], twins: [] },
    drift_pct_per_run: null,
  };

  it("says of a record's stale evidence that it was an earlier result", () => {
    const labels = { a: "R1", b: "R2" };
    render(<AnswerCard result={{ ...resultOf("day"), delta }} labels={labels} stale note={STALE_EVIDENCE} />);
    expect(screen.getByRole("heading", { name: "What the earlier result said" })).toBeTruthy();
    expect(screen.getByText(/Stale when it was decided/)).toBeTruthy();
  });
});

describe("RunsTable", () => {
  const run: RunLine = {
    ...{ runId: "6f0c0c5e-2a0b-4d52-9f0f-0a4b2d1c9e11", number: 1, side: "A", kind: "pull", leg: "out" },
    ...{ order: 1, gear: 3, roadDayId: "day", day: "2030-01-01", testerName: null, logSha256: "" },
    ...{ outcome: "used", why: [], notes: [], peakKw: 184.06, peakUncertaintyKw: 5.52 },
  };

  it("says in what air a run's peak is, with its ±", () => {
    render(<RunsTable runs={[run]} />);
    expect(screen.getByRole("columnheader", { name: /Peak, air of the day ?, kW/ })).toBeTruthy();
    expect(screen.getByRole("cell", { name: "184.1 ± 5.5" })).toBeTruthy();
  });
});
