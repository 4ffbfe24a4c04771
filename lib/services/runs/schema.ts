import { z } from "zod";
import { optionalNumber } from "@/lib/services/number-field";

export const RUN_KINDS = ["pull", "coast-down", "sprint"] as const;
export const LEGS = ["out", "back"] as const;

/** What the tester says of one log, row by row of the drop area. Weather left out is the road day's. */
export const attachRunSchema = z.strictObject({
  uploadId: z.uuid(),
  roadDayId: z.uuid(),
  revisionId: z.uuid("Choose the revision that was in the car."),
  kind: z.enum(RUN_KINDS, "Say what was driven."),
  leg: z.enum(LEGS, "Say which way it was driven: out or back."),
  driveOrder: z.coerce
    .number("Write the place in the driven order.")
    .int("The place in the driven order is a whole number.")
    .min(1, "The first run of the day has place 1.")
    .max(200, "A road day has at most 200 runs."),
  /** Letter of the order card at this place; for a null test only, where both letters are one image. */
  letter: z.enum(["A", "B"]).nullish(),
  gear: optionalNumber({ min: 1, max: 20, integer: true }),
  note: z.string().trim().max(1000, "At most 1,000 characters.").default(""),
  startedAt: z.iso.datetime({ offset: true }).nullable().default(null),
  tempC: z.number().min(-40).max(60).optional(),
  pressureHpa: z.number().min(550).max(1_090).optional(),
  humidityPct: z.number().min(0).max(100).optional(),
  /** The saved key that the log is read with; it must be of the log's header. */
  channelKeyId: z.uuid().nullish(),
});
export type AttachRunForm = z.input<typeof attachRunSchema>;
export type AttachRun = z.output<typeof attachRunSchema>;

/** What attaching answers. */
export const attachedRun = z.object({ runId: z.uuid(), number: z.number().int() });
export type AttachedRun = z.infer<typeof attachedRun>;

const reason = z
  .string()
  .trim()
  .min(10, "Say why in at least 10 characters: the sentence stays on the record.")
  .max(500, "At most 500 characters.");

export const setAsideRunSchema = z.object({ runId: z.uuid(), rowVersion: z.coerce.number().int(), reason });
export type SetAsideRun = z.infer<typeof setAsideRunSchema>;

export const bringBackRunSchema = setAsideRunSchema;
export type BringBackRun = z.infer<typeof bringBackRunSchema>;

export const editRunNoteSchema = z.object({
  runId: z.uuid(),
  rowVersion: z.coerce.number().int(),
  note: z.string().trim().max(1000, "At most 1,000 characters."),
});
export type EditRunNote = z.infer<typeof editRunNoteSchema>;

/** One run of a road day as its list shows it. */
export const runLine = z.object({
  id: z.uuid(),
  number: z.number().int(),
  driveOrder: z.number().int(),
  leg: z.enum(LEGS),
  kind: z.enum(RUN_KINDS),
  gear: z.number().int().nullable(),
  revisionId: z.uuid(),
  revisionNumber: z.number().int(),
  /** Which of the two letters of a null test it is; null on every other road day. */
  letter: z.enum(["A", "B"]).nullable(),
  testerName: z.string(),
  fileName: z.string(),
  verdict: z.enum(["waiting", "usable", "refused"]),
  setAside: z.boolean(),
  /** Plain sentences: why it is refused or set aside. */
  why: z.array(z.string()),
  /** What to do next; null where nothing is to be done. */
  next: z.string().nullable(),
  /** Findings that mask or warn; how many. */
  notes: z.number().int(),
  /** The worst of them in its first sentence; null without any, and where `why` speaks. */
  finding: z.object({ consequence: z.enum(["masked", "warned"]), sentence: z.string() }).nullable(),
  /** Crank estimate in the air of the day. */
  peakKw: z.number().nullable(),
  /** Its ±, about 95 %; null where none is stated. */
  peakUncertaintyKw: z.number().nullable(),
});
export type RunLine = z.infer<typeof runLine>;

/** What the road-day page polls until nothing waits. */
export const roadDayRuns = z.object({ runs: z.array(runLine), waiting: z.number().int() });
export type RoadDayRuns = z.infer<typeof roadDayRuns>;
