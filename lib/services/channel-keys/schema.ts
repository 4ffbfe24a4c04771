import { z } from "zod";
import type { LogPreview } from "@/lib/logs/preview/preview-log";
import { TIME_FORMS } from "@/lib/logs/times/time-forms";

export const KEY_DELIMITERS = [",", ";", "\t", "|"] as const;
export const KEY_ENCODINGS = ["utf-8", "utf-16le", "utf-16be", "windows-1252"] as const;

/** A channel key as a page states it: only what differs from what the file says by itself. */
export const channelKeySchema = z.strictObject({
  delimiter: z.enum(KEY_DELIMITERS).optional(),
  decimal: z.enum([".", ","]).optional(),
  /** Which row that is not blank holds the titles, first = 1; 0: none does. */
  header_rows: z.int("The header row is a whole number.").min(0).max(200).optional(),
  unit_row: z.boolean().optional(),
  encoding: z.enum(KEY_ENCODINGS).optional(),
  time: z.strictObject({ column: z.string().max(200), form: z.enum(TIME_FORMS).optional() }).optional(),
  columns: z
    .record(
      z.string().max(200),
      z.strictObject({
        channel: z
          .string()
          .trim()
          .min(1, "Write a name, or leave the column out.")
          .max(60, "A channel's name has at most 60 characters.")
          .refine((channel) => channel !== "time", "The time column is chosen above the columns.")
          .nullable(),
        unit: z.string().trim().max(20, "A unit has at most 20 characters.").optional(),
      }),
    )
    .refine((columns) => Object.keys(columns).length <= 2000, "A key has at most 2,000 columns.")
    .optional(),
});
export type StatedKey = z.infer<typeof channelKeySchema>;

export const previewRunSchema = z.strictObject({ key: channelKeySchema });

export const saveChannelKeySchema = z.strictObject({
  runId: z.uuid(),
  name: z
    .string()
    .trim()
    .min(2, "Give the logger a name of at least 2 characters.")
    .max(60, "A name has at most 60 characters."),
  /** Newest version that the person saw; 0: there was none. */
  basedOnVersion: z.int().min(0),
  key: channelKeySchema,
  /** Also for every other run of the programme whose log has this header. */
  everyRun: z.boolean(),
});
export type SaveChannelKey = z.infer<typeof saveChannelKeySchema>;

export const applyChannelKeySchema = z.strictObject({
  runId: z.uuid(),
  /** Null: read by what the file says alone. */
  channelKeyId: z.uuid().nullable(),
  everyRun: z.boolean(),
});
export type ApplyChannelKey = z.infer<typeof applyChannelKeySchema>;

/** Which key fits a log. */
export interface FittingKey {
  id: string;
  name: string;
  version: number;
}

/** What came of applying a key. */
export interface AppliedKey {
  /** Numbers of the runs that are judged again. */
  judgedAgain: number[];
  /** Numbers of the runs that stay as they are, since a final decision rests on them. */
  cited: number[];
}

/** What was understood of an upload before it is attached. */
export interface UploadReading {
  wholeFile: boolean;
  rateHz: number | null;
  rowsRead: number;
  columnCount: number;
  found: string[];
  leftOut: string[];
  inDoubt: string[];
  columns: Pick<
    LogPreview["columns"][number],
    "title" | "channel" | "unitFound" | "unit" | "samples" | "min" | "median" | "max"
  >[];
  fitting: FittingKey | null;
  /** The same with the key that fits; null where none fits. */
  withKey: Pick<
    UploadReading,
    "rateHz" | "rowsRead" | "columnCount" | "found" | "leftOut" | "inDoubt"
  > | null;
}
