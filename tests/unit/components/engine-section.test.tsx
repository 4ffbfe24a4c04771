import { cleanup, fireEvent, render, screen } from "@testing-library/react";
import { afterEach, expect, it } from "vitest";
import { EngineSection } from "@/components/features/comparisons/engine/engine-section";
import { RangeMeansTable } from "@/components/features/comparisons/range-means-table";
import type { ChannelDifference, SideFullLoad } from "@/lib/measure/engine/full-load-types";
import type { CampaignResult, RangeMean, SideResult } from "@/lib/measure/types";

afterEach(cleanup);

const LABELS = { a: "R1", b: "R2" };

function side(lambda: number, run: string): SideResult {
  const extreme = { value: lambda, rpm: 3012, at_s: 5, run };
  const full_load: SideFullLoad = {
    ...{ rpm: [3000, 3200], longest_load_s: 9.4, not_recorded: ["exhaust_temperature", "injector_duty"] },
    channels: {
      lambda: { n: 6, values: [lambda, lambda], min: extreme, max: extreme, mean_rise: 0 },
    },
  };
  return { n: 6, basis: "day", rpm: [], engine_kw: [], engine_nm: [], peak: null, full_load };
}

const lambdaDifference: ChannelDifference = {
  ...{ n_a: 6, n_b: 6, rpm: [3000, 3200], difference: [0.02, 0.02], low: [0.01, -0.01], high: [0.03, 0.05] },
  ...{ level: 0.95, simultaneous: true, method: "test" },
  worst: { of: "max", a: 0.86, b: 0.88, difference: 0.02, mean_difference: 0.021, half_width: 0.004 },
};

const result = {
  ...{ analysis_version: "test", runs: [], sides: { A: side(0.86, "3"), B: side(0.88, "6") } },
  delta: { channels: { lambda: lambdaDifference } },
} as unknown as CampaignResult;

it("shows the worst value of each side with run and place, the difference with ±, and what was not recorded", () => {
  render(<EngineSection result={result} labels={LABELS} />);
  const [row] = screen.getAllByRole("row", { name: /Lambda, highest/ });
  const text = row?.textContent ?? "";
  expect(text).toContain("+0.021 ± 0.004");
  expect(text).toContain("0.880");
  expect(text).toContain("run 6");
  expect(screen.getByText(/exhaust temperature \(R1, R2\), injector duty \(R1, R2\)/)).toBeTruthy();
  expect(screen.getAllByText(/Lambda of B is higher than of A at 3.000 per minute/).length).toBeGreaterThan(
    0,
  );
  const chooser = screen.getByRole("combobox", { name: /Channel/ });
  fireEvent.change(chooser, { target: { value: "lambda" } });
  expect(screen.getAllByText(/Lambda/).length).toBeGreaterThan(1);
});

it("says of an older result that it carries no engine channels", () => {
  const older = { ...result, sides: {} };
  render(<EngineSection result={older} labels={LABELS} />);
  expect(screen.getByText(/Recompute the comparison/)).toBeTruthy();
});

it("names a loss before a gain, and claims nothing without an interval", () => {
  const mean = (from_rpm: number, pct: number, half: number | null): RangeMean => ({
    ...{ from_rpm, to_rpm: from_rpm + 1000, pct, n_a: 6, n_b: 6, resolvable_pct: half },
    low_pct: half === null ? null : pct - half,
    high_pct: half === null ? null : pct + half,
  });
  render(
    <RangeMeansTable
      means={[mean(2000, 3, 0.5), mean(3000, 0.2, 0.5), mean(4000, -2, 0.5), mean(5000, 1, null)]}
      level={0.95}
    />,
  );
  const rows = screen
    .getAllByRole("row")
    .slice(1)
    .map((row) => row.textContent ?? "");
  expect(rows[0]).toContain("loss");
  expect(rows[0]).toContain("\u22122.0 ± 0.5");
  expect(rows[1]).toContain("gain");
  expect(rows[2]).toContain("not shown");
  expect(rows[3]).toContain("no interval, not claimed");
  expect(screen.getByText(/no part of the band over the whole curve/)).toBeTruthy();
});
