import { z } from "zod";
import { excludedText, hexText } from "@/components/features/programmes/calibration/region-words";
import type { ChecksumRegion } from "@/lib/calibration/image/checksum-regions";

const HIGHEST = 0xffffffff;

/** A number up to 32 bits as people write it: 0x810000 or 8454144. */
const number32 = z
  .string()
  .trim()
  .regex(/^(0x[0-9a-f]{1,8}|\d{1,10})$/i, "Write it as 0x810000 or as a whole number.")
  .transform(Number)
  .refine((value) => value <= HIGHEST, "It has more than 32 bits.");
const optional32 = z.union([z.literal("").transform(() => null), number32]);

/** "0x810000-0x81000F, 0x820000": stretches that are passed over. */
const spans = z.string().transform((text, context) => {
  const parts = text
    .split(/[,;]/)
    .map((part) => part.trim())
    .filter((part) => part !== "");
  return parts.map((part) => {
    const [from, to] = part.split(/\s*[-–]\s*/).map((end) => number32.safeParse(end));
    if (from?.success && (to === undefined || to.success)) {
      const span = { from: from.data, to: to?.data ?? from.data };
      if (span.from <= span.to) return span;
    }
    context.addIssue({ code: "custom", message: `"${part}" is no stretch: write 0x810000-0x81000F.` });
    return z.NEVER;
  });
});

/** A region as its form holds it; fields that its algorithm does not have are there all the same. */
export const typedRegion = z
  .object({
    name: z.string().trim().min(1, "Give it a name.").max(200, "A name has at most 200 characters."),
    algorithm: z.enum(["crc32", "crc16", "sum8", "sum16", "sum32"]),
    from: number32,
    to: number32,
    storedAt: optional32,
    expected: optional32,
    byteOrder: z.enum(["little", "big"]),
    excluded: spans,
    polynomial: optional32,
    initial: optional32,
    finalXor: optional32,
    reflectIn: z.boolean(),
    reflectOut: z.boolean(),
    wordBytes: z.enum(["1", "2", "4"]),
    wordOrder: z.enum(["little", "big"]),
    complement: z.enum(["none", "ones", "twos"]),
  })
  .refine(({ from, to }) => !(from > to), { path: ["to"], message: "It lies before the first address." })
  .refine(({ storedAt, expected }) => storedAt !== null || expected !== null, {
    path: ["storedAt"],
    message: "Say where the value is stored, or what it must be.",
  })
  .refine(({ algorithm, polynomial }) => !algorithm.startsWith("crc") || polynomial !== null, {
    path: ["polynomial"],
    message: "A CRC needs its polynomial.",
  });
export type TypedRegion = z.input<typeof typedRegion>;

/** What was typed, as the product keeps it. */
export function regionOf(typed: z.output<typeof typedRegion>): ChecksumRegion {
  const { name, from, to, storedAt, expected, byteOrder, excluded, algorithm } = typed;
  const common = { name, from, to, storedAt, expected, byteOrder, ...(excluded.length > 0 && { excluded }) };
  if (algorithm === "crc32" || algorithm === "crc16") {
    const { polynomial, initial, finalXor, reflectIn, reflectOut } = typed;
    const parameters = {
      polynomial: polynomial ?? 0,
      initial: initial ?? 0,
      finalXor: finalXor ?? 0,
      reflectIn,
      reflectOut,
    };
    return { ...common, algorithm, parameters };
  }
  const wordBytes = ({ "1": 1, "2": 2, "4": 4 } as const)[typed.wordBytes];
  return {
    ...common,
    algorithm,
    parameters: { wordBytes, wordOrder: typed.wordOrder, complement: typed.complement },
  };
}

/** A new region; the parameters are those of the CRC-32 of IEEE 802.3 (from memory), to be overwritten. */
export const NEW_REGION: TypedRegion = {
  name: "",
  algorithm: "crc32",
  from: "",
  to: "",
  storedAt: "",
  expected: "",
  byteOrder: "little",
  excluded: "",
  polynomial: "0x4C11DB7",
  initial: "0xFFFFFFFF",
  finalXor: "0xFFFFFFFF",
  reflectIn: true,
  reflectOut: true,
  wordBytes: "1",
  wordOrder: "little",
  complement: "none",
};

/** A kept region as its form holds it. */
export function typedOf(region: ChecksumRegion): TypedRegion {
  const { name, algorithm, from, to, storedAt, expected, byteOrder, parameters } = region;
  const common = {
    ...NEW_REGION,
    name,
    algorithm,
    byteOrder,
    from: hexText(from),
    to: hexText(to),
    excluded: excludedText(region),
    storedAt: storedAt === null ? "" : hexText(storedAt),
    expected: expected === null ? "" : hexText(expected),
  };
  if ("polynomial" in parameters) {
    const { polynomial, initial, finalXor, reflectIn, reflectOut } = parameters;
    return {
      ...common,
      polynomial: hexText(polynomial),
      initial: hexText(initial),
      finalXor: hexText(finalXor),
      reflectIn,
      reflectOut,
    };
  }
  const { wordBytes, wordOrder, complement } = parameters;
  return { ...common, wordBytes: `${wordBytes}`, wordOrder, complement };
}
