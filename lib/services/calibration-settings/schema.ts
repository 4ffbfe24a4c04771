import { z } from "zod";

const name = z.string().trim().min(1, "Give it a name.").max(200, "A name has at most 200 characters.");
const address = z.int().min(0).max(0xffffffff);
const word32 = z.int().min(0).max(0xffffffff);

/** What a lead marked once for a programme: a function of the description, or one characteristic. */
export const relevanceMarkSchema = z.strictObject({
  set: z.enum(["function", "characteristic"]),
  name,
  relevance: z.enum(["emission", "safety"]),
  note: z.string().trim().max(500, "A note has at most 500 characters."),
});

/** Which channel of the logs moves along an axis. */
export const axisLinkSchema = z.strictObject({
  quantity: name,
  channel: name,
  by: z.enum(["column", "title", "hand"]),
});

const region = z.strictObject({
  name,
  from: address,
  /** Last address, inclusive. */
  to: address,
  storedAt: address.nullable(),
  expected: word32.nullable(),
  byteOrder: z.enum(["little", "big"]),
  excluded: z
    .array(z.strictObject({ from: address, to: address }))
    .max(20)
    .optional(),
});
const crc = {
  polynomial: word32,
  initial: word32,
  reflectIn: z.boolean(),
  reflectOut: z.boolean(),
  finalXor: word32,
};
const sum = {
  wordSize: z.union([z.literal(1), z.literal(2), z.literal(4)]),
  complement: z.enum(["none", "ones", "twos"]),
};

/** A stretch of the image whose checksum is declared, with the parameters of its algorithm. */
export const checksumRegionSchema = z.discriminatedUnion("algorithm", [
  region.extend({ algorithm: z.literal("crc32"), ...crc }),
  region.extend({ algorithm: z.literal("crc16"), ...crc }),
  region.extend({ algorithm: z.literal("sum8"), ...sum }),
  region.extend({ algorithm: z.literal("sum16"), ...sum }),
  region.extend({ algorithm: z.literal("sum32"), ...sum }),
]);

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
