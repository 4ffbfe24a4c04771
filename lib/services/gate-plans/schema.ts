import { z } from "zod";
import type { GatePlan, LimitedQuantity } from "@/lib/gates/plan";
import { QUANTITIES } from "@/lib/gates/quantities";
import { optionalNumber, requiredNumber } from "@/lib/services/number-field";

const level = z.enum(["must", "should", "off"]);
const id = z.string().regex(/^[a-z0-9_.-]{1,60}$/);
const percent = requiredNumber({ min: 0, max: 100, unit: "%" });
const rpm = { min: 0, max: 25_000, unit: "per minute" };

const evidence = z.discriminatedUnion("ask", [
  z.object({
    ...{ id, level, kind: z.literal("evidence"), ask: z.literal("closed_twins") },
    atLeastPerSide: requiredNumber({ min: 1, max: 50, integer: true }),
  }),
  z.object({ id, level, kind: z.literal("evidence"), ask: z.literal("counterbalanced") }),
  z.object({
    ...{ id, level, kind: z.literal("evidence"), ask: z.literal("road_days") },
    atLeast: requiredNumber({ min: 1, max: 50, integer: true }),
  }),
]);

const conditions = z.discriminatedUnion("ask", [
  z.object({ id, level, kind: z.literal("conditions"), ask: z.literal("factor_in_range") }),
  z.object({
    ...{ id, level, kind: z.literal("conditions"), ask: z.literal("alike_temperature") },
    withinK: requiredNumber({ min: 0, max: 100, unit: "K" }),
  }),
  z.object({
    ...{ id, level, kind: z.literal("conditions"), ask: z.literal("alike_pressure") },
    withinHpa: requiredNumber({ min: 0, max: 500, unit: "hPa" }),
  }),
  z.object({
    ...{ id, level, kind: z.literal("conditions"), ask: z.literal("alike_mass") },
    withinKg: requiredNumber({ min: 0, max: 1000, unit: "kg" }),
  }),
  z.object({
    ...{ id, level, kind: z.literal("conditions"), ask: z.literal("alike_tyre_pressure") },
    withinKpa: requiredNumber({ min: 0, max: 500, unit: "kPa" }),
  }),
  z.object({ id, level, kind: z.literal("conditions"), ask: z.literal("alike_fuel") }),
  z.object({ id, level, kind: z.literal("conditions"), ask: z.literal("alike_gear") }),
  z.object({ id, level, kind: z.literal("conditions"), ask: z.literal("twin_closure"), withinPct: percent }),
]);

const gain = z
  .object({
    ...{ id, level, kind: z.literal("gain") },
    fromRpm: requiredNumber(rpm),
    toRpm: requiredNumber(rpm),
    atLeastPct: percent,
  })
  .refine((gate) => gate.fromRpm < gate.toRpm, { path: ["toRpm"], message: "Must lie above the start." });

const noLoss = z
  .object({
    ...{ id, level, kind: z.literal("no_loss") },
    fromRpm: optionalNumber(rpm),
    toRpm: optionalNumber(rpm),
    beyondPct: percent,
  })
  .refine((gate) => gate.fromRpm === null || gate.toRpm === null || gate.fromRpm < gate.toRpm, {
    path: ["toRpm"],
    message: "Must lie above the start.",
  });

const sprint = z.object({
  ...{ id, level, kind: z.literal("sprint") },
  time: z.string().trim().min(1, "Choose a time.").max(40),
  notSlowerByS: requiredNumber({ min: 0, max: 60, unit: "s" }),
});

const channelLimit = z
  .object({
    ...{ id, level, kind: z.literal("channel_limit") },
    quantity: z.enum(Object.keys(QUANTITIES) as [LimitedQuantity, ...LimitedQuantity[]]),
    min: optionalNumber({ min: -60, max: 1500 }),
    max: optionalNumber({ min: -60, max: 1500 }),
    leastLoadS: requiredNumber({ min: 0, max: 600, unit: "s" }),
  })
  .refine((gate) => gate.min !== null || gate.max !== null, {
    path: ["max"],
    message: "Give a highest or a lowest value.",
  })
  .refine((gate) => gate.min === null || gate.max === null || gate.min < gate.max, {
    path: ["max"],
    message: "Must lie above the lowest value.",
  });

const smoothCurve = z.object({ id, level, kind: z.literal("smooth_curve"), withinPct: percent });

const MOST_NAMES = 500;

/** Names of characteristics and functions, as a list or as a text with blanks, commas or new lines between them. */
const names = z.union([z.string().max(100_000), z.array(z.string().max(1100))]).transform((raw, context) => {
  const list = typeof raw === "string" ? raw.split(/[\s,;]+/) : raw;
  const once = [...new Set(list.filter((name) => name !== ""))];
  if (once.length > MOST_NAMES)
    context.addIssue({ code: "custom", message: `Name at most ${MOST_NAMES}; functions hold many.` });
  return once;
});

const touched = z
  .object({
    ...{ id, level, kind: z.literal("touched"), uncovered: z.boolean() },
    // Nothing named allows anything described, as null does.
    allowed: z
      .object({ functions: names, characteristics: names })
      .nullable()
      .transform((named) =>
        named && named.functions.length + named.characteristics.length > 0 ? named : null,
      ),
  })
  .refine((gate) => gate.level === "off" || gate.allowed !== null || !gate.uncovered, {
    path: ["uncovered"],
    message: "This allows every change. Name what may change, or set the gate to off.",
  });

const stepLimit = z
  .object({
    ...{ id, level, kind: z.literal("step_limit"), scope: names },
    ...{ measure: z.enum(["share", "unit"]), against: z.enum(["parent", "standing"]) },
    maxNeighbourStep: optionalNumber({ min: 0, max: 1e9 }),
    movedAtMost: optionalNumber({ min: 0, max: 1e9 }),
  })
  .refine((gate) => gate.maxNeighbourStep !== null || gate.movedAtMost !== null, {
    path: ["movedAtMost"],
    message: "Give a largest step or a largest move.",
  })
  .refine((gate) => gate.measure === "share" || gate.scope.length > 0, {
    path: ["scope"],
    message: "Name the tables: a limit in their own unit means something else for each of the others.",
  });

const coverage = z.object({ id, level, kind: z.literal("coverage"), atLeastPct: percent });
const integrity = z.object({ id, level, kind: z.literal("integrity") });
const declaration = z.object({ id, level, kind: z.literal("declaration") });

const road = [evidence, conditions, gain, noLoss, sprint, channelLimit, smoothCurve] as const;
const calibration = [touched, stepLimit, coverage, integrity, declaration] as const;

/** A whole plan. Takes what a form holds (texts) as well as a finished plan. */
export const gatePlanSchema = z
  .object({
    plan: z.literal(1),
    gates: z
      .array(z.union([...road, ...calibration]))
      .min(1, "A plan has at least one gate.")
      .max(60),
  })
  .refine((plan) => new Set(plan.gates.map((gate) => gate.id)).size === plan.gates.length, {
    path: ["gates"],
    message: "Two gates carry the same id. Open the page again.",
  }) satisfies z.ZodType<GatePlan>;

export type GatePlanInput = z.input<typeof gatePlanSchema>;

/** A new version, made from the one that the person looked at; 0 where there was none. */
export const saveGatePlanSchema = z.object({
  programmeId: z.uuid(),
  basedOnVersion: z.number().int().min(0),
  plan: gatePlanSchema,
});
