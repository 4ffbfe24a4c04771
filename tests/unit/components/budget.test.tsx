import { cleanup, render, screen } from "@testing-library/react";
import { afterEach, describe, expect, it } from "vitest";
import { PeaksTable } from "@/components/features/comparisons/peaks-table";
import { SideBudgets } from "@/components/features/comparisons/side-budgets";
import { RunBudget } from "@/components/features/runs/run-budget";
import type { BudgetComponent, CampaignResult, UncertaintyBudget } from "@/lib/measure/types";

afterEach(cleanup);

const part = (component: BudgetComponent, standard_pct: number) => ({
  ...{ component, standard_pct, standard_kw: 2 * standard_pct, basis: `Basis of ${component}.` },
});
const budget: UncertaintyBudget = {
  coverage_factor: 2,
  parts: [part("mass", 0.3), part("mesh efficiency", 1.2), part("wind", 0.4)],
  // 2 · √(0.3² + 1.2² + 0.4²) = 2.6.
  ...{ expanded_pct: 2.6, expanded_kw: 5.2 },
};

describe("RunBudget", () => {
  it("lists the parts by size with their bases, then the whole", () => {
    render(<RunBudget budget={budget} />);
    const heads = screen.getAllByRole("rowheader").map((cell) => cell.textContent);
    expect(heads.map((text) => text?.split(/Basis|Root/)[0])).toEqual([
      "Mesh efficiency",
      "Wind",
      "Mass",
      "Together, times 2: ±",
    ]);
    expect(heads[0]).toContain("Basis of mesh efficiency.");
    const last = screen.getByRole("row", { name: /Together/ }).textContent;
    expect(last).toContain("± 2.60");
    expect(last).toContain("± 5.20");
  });

  it("says what would shrink it most and to what", () => {
    render(<RunBudget budget={budget} />);
    expect(screen.getByText(/Mesh efficiency is the largest part/).textContent).toContain(
      "± 2.6 % would be ± 1.0 %",
    );
  });
});

describe("SideBudgets", () => {
  const labels = { a: "R1", b: "R2" };
  const side = (own: UncertaintyBudget | null) => ({
    ...{ n: 4, basis: "day" as const, rpm: [], engine_kw: [], engine_nm: [] },
    peak: {
      ...{ engine_kw: 200, engine_kw_rpm: 6000, engine_nm: 320, engine_nm_rpm: 3500 },
      ...{ uncertainty_kw: 5.2, uncertainty_nm: 8.4, budget: own },
    },
  });
  const result = (own: UncertaintyBudget | null): CampaignResult => ({
    ...{ analysis_version: "test", runs: [], sides: { A: side(own), B: side(own) } },
  });

  it("has one table a side with its runs", () => {
    render(<SideBudgets result={result(budget)} labels={labels} />);
    expect(screen.getByRole("table", { name: "A, R1: peak power of 4 runs" })).toBeTruthy();
    expect(screen.getByRole("table", { name: "B, R2: peak power of 4 runs" })).toBeTruthy();
  });

  it("says of an older result that it has none", () => {
    render(<SideBudgets result={result(null)} labels={labels} />);
    expect(screen.queryByRole("table")).toBeNull();
    expect(screen.getByText(/Recompute the\s+comparison/)).toBeTruthy();
  });

  it("prints the ± of peak torque too", () => {
    render(<PeaksTable result={result(budget)} labels={labels} />);
    expect(screen.getByRole("row", { name: /Peak torque/ }).textContent).toContain("320.0 ± 8.4");
  });
});
