import { z } from "zod";
import type { ImageDifference, ImageSummary } from "@/lib/calibration/image/image-summary";
import { descriptionUploads } from "@/lib/services/descriptions/schema";

const INTENDED_USES = ["road", "closed_course", "bench"] as const;

const title = z
  .string()
  .trim()
  .min(1, 'Give the revision a short title, e.g. "boost ramp".')
  .max(80, "A title has at most 80 characters.");
const note = z.string().trim().max(4000, "A note has at most 4,000 characters.");
const changeReason = z.string().trim().max(2000, "A change reason has at most 2,000 characters.");
const intendedUse = z.enum(INTENDED_USES, "Say what it is intended for.");
/** Base address of a raw binary as people write it: 0x810000 or 8454144. */
const baseAddress = z
  .string()
  .trim()
  .regex(/^(0x[0-9a-f]{1,8}|\d{1,10})?$/i, "Write the base address as 0x810000 or as a whole number.")
  .transform((text) => (text === "" ? null : Number(text)))
  .refine((value) => value === null || value < 2 ** 32, "A base address is below 0x100000000.");

export const previewImage = z.strictObject({
  uploadId: z.uuid(),
  parentId: z.uuid().nullable(),
  baseAddress: baseAddress.default(null as never),
});

export type PreviewImage = z.input<typeof previewImage>;

/** What was understood of an uploaded image, before it joins the lineage. */
export interface ImagePreview {
  fileName: string;
  sizeBytes: number;
  sha256: string;
  summary: ImageSummary;
  /** Null without a parent. */
  difference: (ImageDifference & { parentNumber: number; sameContent: boolean }) | null;
}

/** What a calibrator states of a new revision. The last three may wait until it is validated. */
export const revisionText = z.strictObject({
  title,
  note,
  changeReason,
  intendedUse: intendedUse.nullable(),
  touchesEmissionOrSafety: z.boolean().nullable(),
});
export type RevisionText = z.infer<typeof revisionText>;

/** The same as a form spells it: every answer is a text, empty = not answered yet. */
export const revisionForm = z.object({
  title,
  note,
  changeReason,
  intendedUse: z.enum([...INTENDED_USES, ""]).transform((value) => (value === "" ? null : value)),
  touchesEmissionOrSafety: z
    .enum(["", "yes", "no"])
    .transform((value) => (value === "" ? null : value === "yes")),
});
export type RevisionFormValues = z.input<typeof revisionForm>;

export const createRevision = revisionText.extend({
  programmeId: z.uuid(),
  parentId: z.uuid().nullable(),
  uploadId: z.uuid(),
  baseAddress: baseAddress.default(null as never),
  /** Files of its description, the main one first; none: bytes only, until one is added. */
  descriptionUploadIds: descriptionUploads.default([]),
  /** Read by the description of its parent, instead of files of its own. */
  sameDescription: z.boolean().default(false),
});
export type CreateRevision = z.input<typeof createRevision>;

export const editRevision = revisionText.extend({ revisionId: z.uuid(), rowVersion: z.int() });

/** A step that needs nothing but the revision. */
export const revisionStep = z.strictObject({ revisionId: z.uuid() });

/** Any step of a revision that needs a reason. */
export const stepWithReason = z.strictObject({
  revisionId: z.uuid(),
  reason: z.string().trim().min(1, "Write a reason: it stays in the ledger.").max(2000),
});

export const adoptAsFound = stepWithReason.extend({
  howRead: z.string().trim().min(1, "Say how the image was read and whether it is whole.").max(500),
  secondReadEqual: z.boolean(),
  passphrase: z.string().min(1, "Sign with your passphrase."),
});
