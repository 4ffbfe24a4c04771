import { cleanup, render, screen } from "@testing-library/react";
import { afterEach, describe, expect, it } from "vitest";
import { TimesTable } from "@/components/features/comparisons/times-table";
import { VehicleSheetView } from "@/components/features/programmes/sheet-view";
import { typedTimings } from "@/components/features/programmes/timing-words";
import { RunTimes } from "@/components/features/runs/run-times";
import type { TimeDifference } from "@/lib/measure/sprint/time-types";
import type { CampaignResult, DeltaResult } from "@/lib/measure/types";
import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";

afterEach(cleanup);

describe("RunTimes", () => {
  const result = { id: "1", usable: true, reasons: [], notes: [] };

  it("prints ± as twice the stated standard uncertainty, and only columns that hold something", () => {
    render(
      <RunTimes
        result={{ ...result, times_s: { "80-120": 3.4 }, times_uncertainty_s: { "80-120": 0.006 } }}
      />,
    );
    expect(screen.getByRole("row", { name: /80-120 km\/h/ }).textContent).toContain("3.400 ± 0.012");
    expect(screen.queryByText(/Trap/)).toBeNull();
  });

  it("shows both clocks side by side, both speeds by their kind, and what the fall adds", () => {
    render(
      <RunTimes
        result={{
          ...result,
          times_s: { "201.168 m": 9.1, "201.168 m ivm": 8.7 },
          times_uncertainty_s: { "201.168 m": 0.015, "201.168 m ivm": 0.005 },
          speed_at_kmh: { "201.168 m": 121.3 },
          speed_uncertainty_kmh: { "201.168 m": 0.1 },
          trap_kmh: { "201.168 m": 119.8 },
          trap_uncertainty_kmh: { "201.168 m": 0.05 },
          net_fall_pct: 0.2,
          net_fall_uncertainty_pct: 0.05,
          net_fall_from: "altitude",
          fall_effect_s: { "201.168 m": -0.021 },
          fall_effect_uncertainty_s: { "201.168 m": 0.006 },
        }}
      />,
    );
    const row = screen.getByRole("row", { name: /201\.168 m/ });
    for (const words of [
      "9.10 ± 0.03",
      "8.700 ± 0.010",
      "121.30 ± 0.20",
      "119.80 ± 0.10",
      "\u22120.021 ± 0.012",
    ])
      expect(row.textContent).toContain(words);
    for (const name of [/From rest/, /From 0\.3048 m/, /instantaneous/, /mean of the last 20\.1168 m/])
      expect(screen.getByRole("columnheader", { name })).toBeTruthy();
    expect(screen.getByText(/0\.20 ± 0\.10 % downhill/)).toBeTruthy();
  });

  it("leaves no time and no speed without its ± or the word that none is stated", () => {
    const times = { times_s: { "201.168 m": 9.1 }, speed_at_kmh: { "201.168 m": 121.3 } };
    render(<RunTimes result={{ ...result, ...times, trap_kmh: { "201.168 m": 119.8 } }} />);
    expect(screen.getByRole("row", { name: /9\.100/ }).textContent?.match(/± not stated/g)).toHaveLength(3);
  });

  it("takes a fall whose ± is not stated for no exact one", () => {
    render(<RunTimes result={{ ...result, times_s: { "201.168 m": 9.1 }, net_fall_pct: -0.2 }} />);
    expect(screen.getByText(/0\.20 % \(± not stated\) uphill/)).toBeTruthy();
  });

  it("says so when no range is covered", () => {
    render(<RunTimes result={result} />);
    expect(screen.getByText(/covers none/)).toBeTruthy();
  });
});

describe("TimesTable", () => {
  const legs = { out: 2, back: 2, unknown: 0 };
  const time = (difference_s: number, more: Partial<TimeDifference> = {}): TimeDifference => ({
    ...{ a_s: 6.5, b_s: 6.5 + difference_s, difference_s, half_width_s: 0.04, n_a: 4, n_b: 4 },
    ...{ kind: "sprint", a_half_width_s: 0.03, b_half_width_s: 0.03, legs_a: legs, legs_b: legs },
    ...more,
  });
  const resultWith = (times_difference: Record<string, TimeDifference>) =>
    ({
      sides: {},
      runs: [],
      delta: { level: 0.95, times_difference } as DeltaResult,
    }) as unknown as CampaignResult;
  const labels = { a: "R1", b: "R2" };

  it("gives A, B and B \u2212 A with their ± and n a leg, the slower before the quicker", () => {
    render(
      <TimesTable result={resultWith({ "0-100 ivm": time(-0.21), "80-120": time(0.1) })} labels={labels} />,
    );
    const [, first, second] = screen.getAllByRole("row").map((row) => row.textContent ?? "");
    expect(first).toMatch(/80-120 km\/h, sprint.*\+0\.10 ± 0\.04/);
    expect(second).toMatch(/0-100 km\/h, clock from 0\.3048 m, sprint.*\u22120\.21 ± 0\.04/);
    expect(second).toContain("6.50 ± 0.03");
    expect(second).toContain("4 (2 out, 2 back)");
  });

  it("claims nothing without an interval, and shows results of older versions", () => {
    const old = { a_s: 3.4, b_s: 3.3, difference_s: -0.1, half_width_s: null, n_a: 1, n_b: 1 };
    render(<TimesTable result={resultWith({ "60-100": old })} labels={labels} />);
    const row = screen.getByRole("row", { name: /60-100 km\/h/ });
    expect(row.textContent).toContain("no interval, not claimed");
    expect(row.textContent).toContain("± not stated");
    cleanup();
    expect(render(<TimesTable result={resultWith({})} labels={labels} />).container.textContent).toBe("");
  });
});

const SHEET: VehicleSheetFigures = {
  ...{ label: "car", engine: "spark ignition", aspiration: "turbo", drive: "FWD", displacementL: null },
  ...{ massPartsKg: [], tyre: null, rollingCircumferenceM: null, gearRatios: [], finalDrive: null },
  ...{ speedAtRpm: null, idleRpm: null, redlineRpm: 6600, engineInertiaKgm2: null, wheelInertiaKgm2: null },
  ...{ meshEfficiency: null, fuelQuantityMgPerLCycle: null },
};

describe("Own timings on the vehicle sheet", () => {
  const timings = {
    speedPairs: [
      { from: 90, to: 130, unit: "km/h" as const },
      { from: 30, to: 90, unit: "mph" as const },
    ],
    distancesM: [304.8],
    fallLimitPct: null,
  };
  it("are shown as they were written, and stand in the form the same way", () => {
    render(<VehicleSheetView sheet={{ ...SHEET, timings }} />);
    expect(screen.getByText("90-130 km/h, 30-90 mph")).toBeTruthy();
    expect(screen.getByText("304.8 m")).toBeTruthy();
    expect(typedTimings(timings)).toEqual({
      speedPairs: "90-130 30-90 mph",
      distancesM: "304.8",
      fallLimitPct: "",
    });
  });
});
