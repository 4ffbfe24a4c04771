import { z } from "zod";
import type { RelevanceMark } from "@/lib/calibration/changes/relevance";
import type { AxisLink } from "@/lib/calibration/coverage/types";
import type { ChecksumRegion } from "@/lib/calibration/image/checksum-regions";

const name = z.string().trim().min(1, "Give it a name.").max(200, "A name has at most 200 characters.");
const address = z.int().min(0).max(0xffffffff);
const word32 = z.int().min(0).max(0xffffffff);

/** What a lead marked once for a programme: a function of the description, or one characteristic. */
export const relevanceMarkSchema = z.strictObject({
  set: z.enum(["function", "characteristic"]),
  name,
  relevance: z.enum(["emission", "safety"]),
  note: z.string().trim().max(500, "A note has at most 500 characters."),
}) satisfies z.ZodType<RelevanceMark>;

/** Which channel of the logs moves along an axis. */
const axisLinkSchema = z.strictObject({
  quantity: name,
  channel: name,
  by: z.enum(["column", "title", "hand"]),
}) satisfies z.ZodType<AxisLink>;

const span = { from: address, to: address };
const region = z.strictObject({
  name,
  ...span,
  storedAt: address.nullable(),
  expected: word32.nullable(),
  byteOrder: z.enum(["little", "big"]),
  excluded: z.array(z.strictObject(span)).max(20).optional(),
});
const crc = z.strictObject({
  polynomial: word32,
  initial: word32,
  reflectIn: z.boolean(),
  reflectOut: z.boolean(),
  finalXor: word32,
});
const sum = z.strictObject({
  wordBytes: z.union([z.literal(1), z.literal(2), z.literal(4)]),
  wordOrder: z.enum(["little", "big"]),
  complement: z.enum(["none", "ones", "twos"]),
});

/** A stretch of the image whose checksum is declared, with the parameters of its algorithm. */
const checksumRegionSchema = z
  .discriminatedUnion("algorithm", [
    region.extend({ algorithm: z.enum(["crc32", "crc16"]), parameters: crc }),
    region.extend({ algorithm: z.enum(["sum8", "sum16", "sum32"]), parameters: sum }),
  ])
  .refine((stretch) => stretch.from <= stretch.to, {
    path: ["to"],
    message: "The last address lies before the first.",
  }) satisfies z.ZodType<ChecksumRegion>;

/** `basedOnVersion`: the version that the person looked at, 0 where there was none. */
const version = { programmeId: z.uuid(), basedOnVersion: z.int().min(0) };

export const saveMarksSchema = z.strictObject({
  ...version,
  marks: z.array(relevanceMarkSchema).max(500, "At most 500 marks."),
});
export const saveLinksSchema = z.strictObject({
  ...version,
  links: z.array(axisLinkSchema).max(500, "At most 500 links."),
});
export const saveRegionsSchema = z.strictObject({
  ...version,
  regions: z.array(checksumRegionSchema).max(50, "At most 50 regions."),
});
