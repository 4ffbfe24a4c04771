import { z } from "zod";
import { MOST_TWINS } from "@/lib/compare/plan/order-card";
import { optionalNumber, requiredNumber } from "@/lib/services/number-field";

/** The safety checklist. Every line must be confirmed at the road side before a run can be attached. */
export const CHECKLIST = [
  {
    item: "closed_road",
    text: "The road is closed to others, or we hold permission for it and keep to its rules.",
  },
  {
    item: "trained_driver",
    text: "The driver is trained for full throttle at these speeds and is fit to drive.",
  },
  { item: "second_person", text: "A second person sits at the recorder. The driver only drives." },
  { item: "tyres", text: "The tyres are undamaged, warm and at the set pressure." },
  { item: "brakes", text: "The brakes work, and the car is in order." },
  { item: "nobody_beside", text: "Nobody stands beside the road or in the braking room." },
  { item: "abort_rule", text: "Everybody knows the abort rule: in any doubt lift off, roll out, stop." },
] as const;
const ITEMS = CHECKLIST.map((line) => line.item);

export interface ConfirmedLine {
  item: string;
  confirmed: boolean;
}

/** Lines that nobody has confirmed yet, in words. Empty = runs may be attached. */
export function openLines(answers: readonly ConfirmedLine[]): string[] {
  const confirmed = new Set(answers.filter((answer) => answer.confirmed).map((answer) => answer.item));
  return CHECKLIST.filter((line) => !confirmed.has(line.item)).map((line) => line.text);
}

const text = (max: number) => z.string().trim().max(max, `At most ${max} characters.`);
const named = (max: number, missing: string) => text(max).min(1, missing);
const isZone = (zone: string): boolean => {
  try {
    new Intl.DateTimeFormat("en", { timeZone: zone });
    return true;
  } catch {
    return false;
  }
};

// Limits only catch slips of the keyboard (common practice, no source); the pressure range spans sea level to 4,500 m.
const figures = {
  day: z.iso.date("Write the day as year-month-day, e.g. 2026-12-01."),
  zone: z.string().trim().refine(isZone, "Write a time zone by its name, e.g. Europe/Berlin."),
  stripName: named(120, "Name the strip."),
  stripLengthM: optionalNumber({ min: 100, max: 20_000, unit: "m" }),
  driver: named(120, "Say who drives."),
  recorder: named(120, "Say who sits at the recorder: never the driver alone."),
  tempC: requiredNumber({ min: -40, max: 60, unit: "°C" }),
  pressureHpa: requiredNumber({ min: 550, max: 1_090, unit: "hPa" }),
  humidityPct: requiredNumber({ min: 0, max: 100, unit: "%" }),
  windNote: text(200),
  fuelNote: text(200),
  tyrePressureFrontKpa: optionalNumber({ min: 80, max: 600, unit: "kPa" }),
  tyrePressureRearKpa: optionalNumber({ min: 80, max: 600, unit: "kPa" }),
  massKg: optionalNumber({ min: 200, max: 20_000, unit: "kg" }),
};

/** The figures as the form of a new day and of a correction share them. */
export const roadDayFields = z
  .object(figures)
  .refine(({ driver, recorder }) => driver.toLocaleLowerCase("en") !== recorder.toLocaleLowerCase("en"), {
    path: ["recorder"],
    message: "The driver can't be at the recorder: a second person is.",
  });

/** What a road day is opened for. Fixed from then on, since the runs that follow take their side from it. */
export const roadDayPurpose = z.object({
  /** The one image of a null test; null or absent: two images are compared. */
  nullTestRevisionId: z.uuid("Choose the revision that the null test drives.").nullish(),
  /** Null test only: the same image is written anew wherever the letter changes. */
  nullTestRewrites: z.boolean().optional(),
  plannedTwins: z.coerce.number().int().min(1).max(MOST_TWINS).nullish(),
});
export type RoadDayPurpose = z.output<typeof roadDayPurpose>;

export const newRoadDaySchema = z.object({ programmeId: z.uuid() }).and(roadDayPurpose).and(roadDayFields);
export type NewRoadDay = z.output<typeof newRoadDaySchema>;

export const editRoadDaySchema = z
  .object({ roadDayId: z.uuid(), rowVersion: z.coerce.number().int() })
  .and(roadDayFields);
export type EditRoadDay = z.output<typeof editRoadDaySchema>;

export const confirmChecklistSchema = z.object({
  roadDayId: z.uuid(),
  confirmed: z.array(z.enum(ITEMS)).max(ITEMS.length),
});
export type ConfirmChecklist = z.infer<typeof confirmChecklistSchema>;
