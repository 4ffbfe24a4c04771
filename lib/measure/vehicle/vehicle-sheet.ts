import type { SheetTimings } from "@/lib/measure/sprint/sheet-timings";
import type { CampaignVehicle } from "@/lib/measure/types";

/** A figure with its standard uncertainty, both in the unit that the field's name states. */
export interface Figure {
  value: number;
  uncertainty: number | null;
}

/** The vehicle sheet of a programme: what the computation needs to know of the car. */
export interface VehicleSheetFigures {
  label: string;
  engine: CampaignVehicle["engine"];
  aspiration: CampaignVehicle["aspiration"];
  drive: CampaignVehicle["drive"];
  displacementL: number | null;
  /** Test mass by part: car as weighed, driver, fuel, load. */
  massPartsKg: { part: string; value: number; uncertainty: number | null }[];
  tyre: string | null;
  rollingCircumferenceM: Figure | null;
  gearRatios: number[];
  finalDrive: number | null;
  speedAtRpm: { gear: number; rpm: number; speedKmh: number } | null;
  idleRpm: number | null;
  redlineRpm: number;
  engineInertiaKgm2: Figure | null;
  wheelInertiaKgm2: Figure | null;
  meshEfficiency: Figure | null;
  fuelQuantityMgPerLCycle: number | null;
  /** Own ranges and distances to time; absent: the usual ones only. */
  timings?: SheetTimings | undefined;
}

/**
 * The sheet in the spelling of the analysis.
 * Mass is the sum of the parts (kg), its uncertainty the root sum of squares of the parts' stated ones (GUM, JCGM 100:2008, 5.1.2);
 * null when no part states one. Uncertainties of the other figures as stated, null where not. `massKg` replaces the sum, e.g. on
 * a road day with another driver.
 */
export function toCampaignVehicle(sheet: VehicleSheetFigures, massKg: number | null = null): CampaignVehicle {
  const stated = sheet.massPartsKg.map((part) => part.uncertainty).filter((u) => u !== null);
  return {
    label: sheet.label,
    engine: sheet.engine,
    aspiration: sheet.aspiration,
    drive: sheet.drive,
    displacement_l: sheet.displacementL,
    mass_kg: massKg ?? sheet.massPartsKg.reduce((sum, part) => sum + part.value, 0),
    mass_uncertainty_kg: stated.length === 0 ? null : Math.hypot(...stated),
    tyre: sheet.tyre,
    rolling_circumference_m: sheet.rollingCircumferenceM?.value ?? null,
    gear_ratios: sheet.gearRatios,
    final_drive: sheet.finalDrive,
    speed_at_rpm: sheet.speedAtRpm && {
      gear: sheet.speedAtRpm.gear,
      rpm: sheet.speedAtRpm.rpm,
      speed_kmh: sheet.speedAtRpm.speedKmh,
    },
    redline_rpm: sheet.redlineRpm,
    engine_inertia_kgm2: sheet.engineInertiaKgm2?.value ?? null,
    wheel_inertia_kgm2: sheet.wheelInertiaKgm2?.value ?? null,
    mesh_efficiency: sheet.meshEfficiency?.value ?? null,
    rolling_circumference_uncertainty_m: sheet.rollingCircumferenceM?.uncertainty ?? null,
    engine_inertia_uncertainty_kgm2: sheet.engineInertiaKgm2?.uncertainty ?? null,
    wheel_inertia_uncertainty_kgm2: sheet.wheelInertiaKgm2?.uncertainty ?? null,
    mesh_efficiency_uncertainty: sheet.meshEfficiency?.uncertainty ?? null,
    qc_mg_per_l_cycle: sheet.fuelQuantityMgPerLCycle,
  };
}
