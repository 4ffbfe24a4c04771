import { describe, expect, it } from "vitest";
import { parseCampaignFile } from "@/lib/campaign/campaign-schema";
import { densityUncertainty, factorUncertainty } from "@/lib/measure/air/weather-uncertainty";
import { runScatter } from "@/lib/measure/curve/run-scatter";
import type { CampaignVehicle } from "@/lib/measure/types";
import { drivelineFigures, rollingCircumference, testMass } from "@/lib/measure/vehicle/vehicle";
import { toCampaignVehicle, type VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";
import { expectClose } from "../../support/expect-close";

const SPARK = { engine: "spark ignition", aspiration: "natural" } as const;
/** Standard uncertainties of readings within ±1 °C and ±0.7 kPa, evenly likely: limit over √3 (JCGM 100:2008, 4.3.7). */
const U_T = 1 / Math.sqrt(3);
const U_P = 7 / Math.sqrt(3);

describe("Uncertainty of the weather readings", () => {
  it("goes into the density of dry air by 1/T and 1/p (ideal gas)", () => {
    const cold = { temp_c: -20, pressure_hpa: 1000, rh_pct: 0 };
    // At −20 °C vapour is at most 1.25 hPa of 1000: its part stays below 0.01 %.
    expectClose(densityUncertainty(cold), Math.hypot(U_T / 253.15, U_P / 1000), { rel: 0.01 });
  });

  it("goes into the factor CFa = (99/pd)·√(T/298) by −1/p, 1/2T and the vapour", () => {
    const weather = { temp_c: 25, pressure_hpa: 1000, rh_pct: 50 };
    // Saturation vapour at 25 °C: 31.7 hPa, growing by 6.0 % a kelvin (steam tables).
    const dry = 1000 - 0.5 * 31.7;
    const byTemperature = U_T * (0.5 / 298 + (0.06 * 0.5 * 31.7) / dry);
    const byHumidity = ((0.05 / Math.sqrt(3)) * 31.7) / dry;
    const expected = Math.hypot(U_P / dry, byTemperature, byHumidity);
    expectClose(factorUncertainty("j1349_sqrt", weather, SPARK), expected, { rel: 0.01 });
  });

  it("is none without a factor, and wide without a reading", () => {
    expect(factorUncertainty("none", { temp_c: 20, pressure_hpa: 1000, rh_pct: 50 }, SPARK)).toBe(0);
    expect(densityUncertainty(null)).toBeGreaterThan(0.01);
  });
});

const sheet: VehicleSheetFigures = {
  label: "car",
  ...{ engine: "spark ignition", aspiration: "turbo", drive: "FWD", displacementL: 2, redlineRpm: 6500 },
  massPartsKg: [
    { part: "car", value: 1400, uncertainty: 8 },
    { part: "driver", value: 80, uncertainty: 6 },
  ],
  ...{ tyre: null, gearRatios: [3, 2], finalDrive: 4, speedAtRpm: null, idleRpm: null },
  rollingCircumferenceM: { value: 1.96, uncertainty: 0.004 },
  engineInertiaKgm2: { value: 0.16, uncertainty: 0.02 },
  wheelInertiaKgm2: { value: 4.2, uncertainty: null },
  meshEfficiency: null,
  fuelQuantityMgPerLCycle: null,
};

describe("Uncertainties of the vehicle sheet", () => {
  const vehicle = toCampaignVehicle(sheet);
  it("reach the analysis as typed", () => {
    // 8 and 6 added as squares: 10 (JCGM 100:2008, 5.1.2).
    expect(testMass(vehicle)).toEqual({ value: 1480, uncertainty: 10, source: "vehicle sheet" });
    expect(rollingCircumference(vehicle)?.uncertainty).toBe(0.004);
    expect(drivelineFigures(vehicle).engineInertia).toMatchObject({ value: 0.16, uncertainty: 0.02 });
  });

  it("fall back on the class where none is typed: 5 % of an inertia, the whole default of what is absent", () => {
    const { wheelInertia, meshEfficiency } = drivelineFigures(vehicle);
    expectClose(wheelInertia.uncertainty, 0.05 * 4.2, { rel: 1e-9 });
    expect(meshEfficiency.source).toMatch(/default by class/);
    const bare: CampaignVehicle = { ...vehicle, mass_uncertainty_kg: null };
    expectClose(testMass(bare, 1000).uncertainty, 15, { rel: 1e-9 });
  });

  it("may be typed in a campaign file, but not below zero", () => {
    const file = (vehicleFields: object) =>
      JSON.stringify({
        campaign: 1,
        vehicle: { ...vehicle, ...vehicleFields },
        runs: [{ id: "r01", file: "r01.csv", kind: "pull" }],
      });
    const read = parseCampaignFile(file({ mesh_efficiency: 0.95, mesh_efficiency_uncertainty: 0.007 }));
    expect(read.campaign.vehicle.mesh_efficiency_uncertainty).toBe(0.007);
    expect(() => parseCampaignFile(file({ wheel_inertia_uncertainty_kgm2: -1 }))).toThrow(
      /wheel_inertia_uncertainty_kgm2/,
    );
  });
});

describe("runScatter", () => {
  it("pools the squares about each side's own mean over n − 1", () => {
    const rpm = [2000];
    // Side A: 99, 101 about 100 (squares 0.0001 twice, 1 degree); B: 98, 100, 102 about 100 (0.0004 twice, 2 degrees).
    const found = runScatter(rpm, [
      { mean: [100], curves: [[99], [101]] },
      { mean: [100], curves: [[98], [100], [102]] },
    ]);
    expectClose(found.relative[0] ?? 0, Math.sqrt(0.001 / 3), { rel: 1e-9 });
    expect(found.degrees).toEqual([3]);
  });
  it("knows none where no side has two runs", () => {
    expect(runScatter([2000], [{ mean: [100], curves: [[100]] }])).toEqual({
      relative: [null],
      degrees: [0],
    });
  });
  it("has at each point the degrees of freedom of the runs that reach it, not of the point with most (by hand)", () => {
    const found = runScatter(
      [2000, 2050, 2100],
      [
        {
          mean: [100, 100, 100],
          curves: [
            [99, 99, null],
            [101, 101, 100],
          ],
        },
        {
          mean: [100, 100, null],
          curves: [
            [98, 98, null],
            [100, null, null],
            [102, 102, null],
          ],
        },
      ],
    );
    expect(found.degrees).toEqual([3, 2, 0]);
    expect(found.relative[2]).toBeNull();
  });
});
