import { type TypedTimings, typedTimings } from "@/components/features/programmes/timing-words";
import type { Figure, VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";

interface TypedFigure {
  value: string;
  uncertainty: string;
}

/** A vehicle sheet as its form holds it: every number as it is typed. Fits the input of vehicleSheetSchema. */
export interface SheetValues {
  label: string;
  engine: VehicleSheetFigures["engine"];
  aspiration: VehicleSheetFigures["aspiration"];
  drive: VehicleSheetFigures["drive"];
  displacementL: string;
  massPartsKg: { part: string; value: string; uncertainty: string }[];
  tyre: string;
  rollingCircumferenceM: TypedFigure;
  gearRatios: string;
  finalDrive: string;
  speedAtRpm: { gear: string; rpm: string; speedKmh: string };
  idleRpm: string;
  redlineRpm: string;
  engineInertiaKgm2: TypedFigure;
  wheelInertiaKgm2: TypedFigure;
  meshEfficiency: TypedFigure;
  fuelQuantityMgPerLCycle: string;
  timings: TypedTimings;
}

/** Every form that holds a sheet holds it under this name. */
export interface SheetFields {
  sheet: SheetValues;
}

const text = (value: number | null | undefined): string => (value == null ? "" : String(value));
const typed = (figure: Figure | null): TypedFigure => ({
  value: text(figure?.value),
  uncertainty: text(figure?.uncertainty),
});

/** What the form starts with for a sheet that exists. */
export function sheetValues(sheet: VehicleSheetFigures): SheetValues {
  return {
    label: sheet.label,
    engine: sheet.engine,
    aspiration: sheet.aspiration,
    drive: sheet.drive,
    displacementL: text(sheet.displacementL),
    massPartsKg: sheet.massPartsKg.map(({ part, value, uncertainty }) => ({
      part,
      value: text(value),
      uncertainty: text(uncertainty),
    })),
    tyre: sheet.tyre ?? "",
    rollingCircumferenceM: typed(sheet.rollingCircumferenceM),
    gearRatios: sheet.gearRatios.join(" "),
    finalDrive: text(sheet.finalDrive),
    speedAtRpm: {
      gear: text(sheet.speedAtRpm?.gear),
      rpm: text(sheet.speedAtRpm?.rpm),
      speedKmh: text(sheet.speedAtRpm?.speedKmh),
    },
    idleRpm: text(sheet.idleRpm),
    redlineRpm: text(sheet.redlineRpm),
    engineInertiaKgm2: typed(sheet.engineInertiaKgm2),
    wheelInertiaKgm2: typed(sheet.wheelInertiaKgm2),
    meshEfficiency: typed(sheet.meshEfficiency),
    fuelQuantityMgPerLCycle: text(sheet.fuelQuantityMgPerLCycle),
    timings: typedTimings(sheet.timings),
  };
}

const EMPTY: TypedFigure = { value: "", uncertainty: "" };

/** What the form starts with for a new programme: nothing known, the mass parted as it is weighed. */
export const EMPTY_SHEET: SheetValues = {
  label: "",
  engine: "spark ignition",
  aspiration: "turbo",
  drive: "FWD",
  displacementL: "",
  massPartsKg: ["Car as weighed", "Driver", "Fuel", "Load"].map((part) => ({
    part,
    value: "",
    uncertainty: "",
  })),
  tyre: "",
  rollingCircumferenceM: EMPTY,
  gearRatios: "",
  finalDrive: "",
  speedAtRpm: { gear: "", rpm: "", speedKmh: "" },
  idleRpm: "",
  redlineRpm: "",
  engineInertiaKgm2: EMPTY,
  wheelInertiaKgm2: EMPTY,
  meshEfficiency: EMPTY,
  fuelQuantityMgPerLCycle: "",
  timings: typedTimings(undefined),
};
