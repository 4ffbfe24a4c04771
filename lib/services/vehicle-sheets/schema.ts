import { z } from "zod";
import { readTypedNumber } from "@/lib/format/typed-number";
import type { VehicleSheetFigures } from "@/lib/measure/vehicle/vehicle-sheet";
import { optionalNumber, requiredNumber } from "@/lib/services/number-field";
import { sheetTimings } from "@/lib/services/vehicle-sheets/schema-timings";

/** The limits only catch slips of the keyboard; common practice, no source. */
const LIMITS = {
  massPart: { min: 0, max: 20_000, unit: "kg" },
  massTotal: { min: 200, max: 20_000 },
  circumference: { min: 0.5, max: 6, unit: "m" },
  gearRatio: { min: 0.1, max: 50 },
  rpm: { min: 100, max: 25_000, unit: "per minute" },
  speed: { min: 1, max: 500, unit: "km/h" },
  displacement: { min: 0.04, max: 60, unit: "L" },
  engineInertia: { min: 0.001, max: 50, unit: "kg m²" },
  wheelInertia: { min: 0.01, max: 500, unit: "kg m²" },
  efficiency: { min: 0.5, max: 1 },
  fuelQuantity: { min: 1, max: 500, unit: "mg per litre and cycle" },
  gear: { min: 1, max: 20, integer: true },
} as const;
const GEARS_MAX = 20;
const RATIO_RANGE = `A ratio lies between ${LIMITS.gearRatio.min} and ${LIMITS.gearRatio.max}.`;

const uncertainty = optionalNumber({ min: 0, max: 100_000 });

/** A figure with its standard uncertainty; without a value it is not known (null). */
function figure(limits: { min: number; max: number; unit?: string }) {
  return z
    .object({ value: optionalNumber(limits), uncertainty })
    .nullable()
    .transform((raw, context) => {
      if (raw === null || (raw.value === null && raw.uncertainty === null)) return null;
      if (raw.value === null) {
        context.addIssue({ code: "custom", path: ["value"], message: "Write the figure its ± belongs to." });
        return null;
      }
      if (raw.uncertainty !== null && raw.uncertainty >= Math.abs(raw.value)) {
        context.addIssue({
          code: "custom",
          path: ["uncertainty"],
          message: "Is as large as the figure itself.",
        });
      }
      return { value: raw.value, uncertainty: raw.uncertainty };
    });
}

const massPart = z.object({
  part: z.string().trim().min(1, "Name the part.").max(80),
  value: requiredNumber(LIMITS.massPart),
  uncertainty,
});

/** Engine speed against road speed in one gear, read off once; all three or none. */
const speedAtRpm = z
  .object({
    gear: optionalNumber(LIMITS.gear),
    rpm: optionalNumber(LIMITS.rpm),
    speedKmh: optionalNumber(LIMITS.speed),
  })
  .nullable()
  .transform((raw, context) => {
    if (raw === null) return null;
    const { gear, rpm, speedKmh } = raw;
    if (gear === null && rpm === null && speedKmh === null) return null;
    if (gear !== null && rpm !== null && speedKmh !== null) return { gear, rpm, speedKmh };
    context.addIssue({
      code: "custom",
      path: ["gear"],
      message: "Gear, engine speed and road speed go together.",
    });
    return null;
  });

/** Ratios in a row, first gear first: "3.62 2,11 1.44" or a list of numbers. Empty: not known. */
const gearRatios = z.union([z.string(), z.array(z.number())]).transform((raw, context): number[] => {
  if (typeof raw !== "string") return raw;
  const words = raw.split(/[\s;]+/).filter((word) => word !== "");
  const ratios = words.map(readTypedNumber);
  const wrong = words.find((_, index) => !Number.isFinite(ratios[index]));
  if (wrong !== undefined)
    context.addIssue({ code: "custom", message: `"${wrong}" is not a number. Part the ratios by spaces.` });
  return ratios;
});

const optionalText = z
  .string()
  .trim()
  .max(80)
  .nullable()
  .transform((text) => text || null);

/** Every figure of a vehicle sheet. Takes what a form holds (texts) as well as a finished sheet. */
export const vehicleSheetSchema = z
  .object({
    label: z.string().trim().min(1, "Name the vehicle.").max(120),
    engine: z.enum(["spark ignition", "compression ignition"]),
    aspiration: z.enum(["natural", "turbo", "supercharged"]),
    drive: z.enum(["FWD", "RWD", "AWD"]),
    displacementL: optionalNumber(LIMITS.displacement),
    massPartsKg: z.array(massPart).min(1, "Write at least the car as weighed.").max(20),
    tyre: optionalText,
    rollingCircumferenceM: figure(LIMITS.circumference),
    gearRatios: gearRatios.pipe(
      z
        .array(z.number().min(LIMITS.gearRatio.min, RATIO_RANGE).max(LIMITS.gearRatio.max, RATIO_RANGE))
        .max(GEARS_MAX, `At most ${GEARS_MAX} gears.`),
    ),
    finalDrive: optionalNumber(LIMITS.gearRatio),
    speedAtRpm,
    idleRpm: optionalNumber(LIMITS.rpm),
    redlineRpm: requiredNumber(LIMITS.rpm),
    engineInertiaKgm2: figure(LIMITS.engineInertia),
    wheelInertiaKgm2: figure(LIMITS.wheelInertia),
    meshEfficiency: figure(LIMITS.efficiency),
    fuelQuantityMgPerLCycle: optionalNumber(LIMITS.fuelQuantity),
    timings: sheetTimings,
  })
  .superRefine((sheet, context) => {
    const total = sheet.massPartsKg.reduce((sum, part) => sum + part.value, 0);
    if (Number.isFinite(total) && (total < LIMITS.massTotal.min || total > LIMITS.massTotal.max)) {
      const message = `The parts add up to ${total} kg; the test mass must lie between ${LIMITS.massTotal.min} and ${LIMITS.massTotal.max} kg.`;
      context.addIssue({ code: "custom", path: ["massPartsKg"], message });
    }
    if (sheet.idleRpm !== null && sheet.idleRpm >= sheet.redlineRpm) {
      context.addIssue({ code: "custom", path: ["redlineRpm"], message: "Must lie above the idle speed." });
    }
  }) satisfies z.ZodType<VehicleSheetFigures>;

export type VehicleSheetInput = z.input<typeof vehicleSheetSchema>;

/** A new version, made from the one that the person looked at. */
export const saveVehicleSheetSchema = z.object({
  programmeId: z.uuid(),
  basedOnVersion: z.number().int().min(1),
  figures: vehicleSheetSchema,
});
