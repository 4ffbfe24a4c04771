import { z } from "zod";
import { readTypedNumber } from "@/lib/format/typed-number";
import type { SheetTimings } from "@/lib/measure/sprint/sheet-timings";
import { optionalNumber } from "@/lib/services/number-field";

/** The limits only catch slips of the keyboard; common practice, no source. */
const LARGEST_SPEED = 500;
const DISTANCE_M = { min: 5, max: 5000 };
const FALL_PCT = { min: 0.05, max: 5, unit: "%" };
const LIST_MAX = 20;

type Pair = SheetTimings["speedPairs"][number];
const PAIR = /^([\d.,]+)[-–\u2212]([\d.,]+?)(mph|km\/h)?$/i;

const words = (text: string) => text.split(/[\s;]+/).filter((word) => word !== "");

/** Pairs in a row, km/h unless a pair says mph: "90-130 30-90 mph" or a list. */
const speedPairs = z
  .union([z.string(), z.array(z.object({ from: z.number(), to: z.number(), unit: z.enum(["km/h", "mph"]) }))])
  .transform((raw, context): Pair[] => {
    const wrong = (message: string) => context.addIssue({ code: "custom", message });
    const pairs =
      typeof raw !== "string"
        ? raw
        : words(raw.replace(/\s+(?=mph|km\/h)/gi, "").replace(/\s*[-–\u2212]\s*/g, "-")).flatMap((word) => {
            const found = PAIR.exec(word.replace(/,$/, ""));
            if (!found) {
              wrong(
                `"${word}" is not a pair of speeds. Write them like 90-130 or 30-90 mph, parted by spaces.`,
              );
              return [];
            }
            const [, from = "", to = "", unit] = found;
            const isMph = unit?.toLowerCase() === "mph";
            return [
              { from: readTypedNumber(from), to: readTypedNumber(to), unit: isMph ? "mph" : "km/h" } as const,
            ];
          });
    for (const { from, to } of pairs) {
      if (!(from >= 0 && to > from && to <= LARGEST_SPEED))
        wrong(`${from}-${to}: the second speed must be above the first, and at most ${LARGEST_SPEED}.`);
    }
    if (pairs.length > LIST_MAX) wrong(`At most ${LIST_MAX} pairs.`);
    return [...pairs];
  });

/** Distances in a row, m: "304.8 804.672" or a list. */
const distancesM = z.union([z.string(), z.array(z.number())]).transform((raw, context): number[] => {
  const typed = typeof raw === "string" ? words(raw) : raw.map(String);
  const wrong = (message: string) => context.addIssue({ code: "custom", message });
  const distances = typed.map((word) => readTypedNumber(word.replace(/,$/, "")));
  distances.forEach((wayM, k) => {
    if (!(wayM >= DISTANCE_M.min && wayM <= DISTANCE_M.max))
      wrong(
        `"${typed[k]}" is not a distance between ${DISTANCE_M.min} and ${DISTANCE_M.max} m. Part them by spaces.`,
      );
  });
  if (distances.length > LIST_MAX) wrong(`At most ${LIST_MAX} distances.`);
  return distances;
});

/** What a programme times of its own; nothing when all is left empty. */
export const sheetTimings = z
  .object({ speedPairs, distancesM, fallLimitPct: optionalNumber(FALL_PCT) })
  .optional()
  .transform((timings): SheetTimings | undefined =>
    timings &&
    (timings.speedPairs.length > 0 || timings.distancesM.length > 0 || timings.fallLimitPct !== null)
      ? timings
      : undefined,
  );
