import { type CrcParameters, crcOf } from "@/lib/calibration/image/cyclic-redundancy";
import { segmentAt } from "@/lib/calibration/image/segment-at";
import { type CalibrationImage, formatAddress } from "@/lib/calibration/image/types";

type ByteOrder = "little" | "big";

/** A sum of words, cut to the checksum's own width; its complement is taken in that width. */
export interface SumParameters {
  wordBytes: 1 | 2 | 4;
  wordOrder: ByteOrder;
  complement: "none" | "ones" | "twos";
}

/** Addresses, both ends inside. */
export interface AddressSpan {
  from: number;
  to: number;
}

/** A stretch of the image whose checksum the programme has declared. */
export type ChecksumRegion = AddressSpan & {
  name: string;
  /** Address at which the image stores the value, low or high byte first as `byteOrder` says; null = not stored. */
  storedAt: number | null;
  byteOrder: ByteOrder;
  /** The value that must come out, stated by a person; null = only the stored one counts. */
  expected: number | null;
  /** Stretches inside that are passed over as if they were not there; the stored value's own bytes always are. */
  excluded?: readonly AddressSpan[];
} & (
    | { algorithm: "crc32" | "crc16"; parameters: CrcParameters }
    | { algorithm: "sum8" | "sum16" | "sum32"; parameters: SumParameters }
  );

/** "not_there": the check can't be made, for the reason in `sentence`. `found` and `expected` are hexadecimal with 0x. */
export interface RegionResult {
  name: string;
  state: "holds" | "broken" | "not_there";
  found: string | null;
  expected: string | null;
  sentence: string;
}

type Image = Pick<CalibrationImage, "segments">;

/** Bytes of a value of each algorithm. */
export const VALUE_BYTES = { crc32: 4, crc16: 2, sum8: 1, sum16: 2, sum32: 4 } as const;
const TITLES = {
  crc32: "CRC-32",
  crc16: "CRC-16",
  sum8: "8-bit sum",
  sum16: "16-bit sum",
  sum32: "32-bit sum",
} as const;

/** Why a region can't be checked; carries the sentence. */
class NotThere extends Error {}

/** Works out every declared region and compares it with what is stored in the image and with what a person stated. Never throws. */
export function checkRegions(image: Image, regions: readonly ChecksumRegion[]): RegionResult[] {
  return regions.map((region) => {
    try {
      return checkRegion(image, region);
    } catch (error) {
      if (!(error instanceof NotThere)) throw error;
      return {
        name: region.name,
        state: "not_there",
        found: null,
        expected: null,
        sentence: `Region "${region.name}": ${error.message}`,
      };
    }
  });
}

function checkRegion(image: Image, region: ChecksumRegion): RegionResult {
  const { name, storedAt, expected, algorithm } = region;
  const size = VALUE_BYTES[algorithm];
  if (storedAt === null && expected === null)
    throw new NotThere("neither a stored nor an expected value is declared. Declare one of them.");
  const value = regionValue(image, region);
  const written = (number: number) =>
    `0x${number
      .toString(16)
      .toUpperCase()
      .padStart(2 * size, "0")}`;
  const found = written(value);
  const start = `Region "${name}", ${formatAddress(region.from)} to ${formatAddress(region.to)}: its ${TITLES[algorithm]} is ${found}`;
  const result = (state: "holds" | "broken", against: string, rest: string): RegionResult => ({
    name,
    state,
    found,
    expected: against,
    sentence: `${start}, ${rest}.`,
  });
  if (storedAt !== null) {
    const stored = written(
      wordAt(bytesOf(image, { from: storedAt, to: storedAt + size - 1 }), region.byteOrder),
    );
    const place = `stored at ${formatAddress(storedAt)}`;
    if (stored !== found) return result("broken", stored, `but ${stored} is ${place}`);
    if (expected === null) return result("holds", stored, `as ${place}`);
  }
  const stated = written(expected ?? value);
  return stated === found
    ? result("holds", stated, "as declared")
    : result("broken", stated, `but ${stated} is declared`);
}

/**
 * The checksum of a region over the bytes that are left when the excluded stretches and the stored value are taken out.
 * @throws NotThere for a byte that the image does not have, or words that do not come out even
 */
function regionValue(image: Image, region: ChecksumRegion): number {
  const width = VALUE_BYTES[region.algorithm];
  const { storedAt } = region;
  const own = storedAt === null ? [] : [{ from: storedAt, to: storedAt + width - 1 }];
  const pieces = cutOut(region, [...(region.excluded ?? []), ...own]).map((span) => bytesOf(image, span));
  if (pieces.length === 0) throw new NotThere("nothing is left of it. Check its addresses.");
  switch (region.algorithm) {
    case "crc32":
      return crcOf(pieces, 32, region.parameters);
    case "crc16":
      return crcOf(pieces, 16, region.parameters);
    default:
      return sumOf(pieces, 2 ** (8 * width), region.parameters);
  }
}

/** What is left of `whole`, in rising order. */
function cutOut(whole: AddressSpan, holes: readonly AddressSpan[]): AddressSpan[] {
  const left: AddressSpan[] = [];
  let from = whole.from;
  for (const hole of [...holes].sort((a, b) => a.from - b.from)) {
    if (hole.from > from && from <= whole.to) left.push({ from, to: Math.min(whole.to, hole.from - 1) });
    from = Math.max(from, hole.to + 1);
  }
  if (from <= whole.to) left.push({ from, to: whole.to });
  return left;
}

function bytesOf(image: Image, { from, to }: AddressSpan): Uint8Array {
  // Segments never touch, so a stretch without a gap lies in one of them.
  const segment = segmentAt(image.segments, from);
  const missing = segment ? segment.address + segment.bytes.length : from;
  if (!segment || missing <= to)
    throw new NotThere(`the image has no byte at ${formatAddress(missing)}, so it can't be checked.`);
  return segment.bytes.subarray(from - segment.address, to - segment.address + 1);
}

function wordAt(bytes: Uint8Array, order: ByteOrder): number {
  let word = 0;
  for (let i = 0; i < bytes.length; i++)
    word = word * 256 + bytes[order === "big" ? i : bytes.length - 1 - i];
  return word;
}

function sumOf(pieces: readonly Uint8Array[], modulus: number, parameters: SumParameters): number {
  const { wordBytes, wordOrder, complement } = parameters;
  let sum = 0;
  for (const bytes of pieces) {
    if (bytes.length % wordBytes !== 0)
      throw new NotThere(
        `${bytes.length} bytes without a gap are no whole number of ${8 * wordBytes}-bit words. Check its addresses.`,
      );
    sum = (sum + wordSum(bytes, wordBytes, wordOrder)) % modulus;
  }
  if (complement === "ones") return modulus - 1 - sum;
  return complement === "twos" ? (modulus - sum) % modulus : sum;
}

/** Sum of the words modulo 2^32. Bytes are added place by place and each total is cut before it is weighted, so it stays exact. */
function wordSum(bytes: Uint8Array, wordBytes: number, order: ByteOrder): number {
  const weights = Array.from(
    { length: wordBytes },
    (_, i) => 256 ** (order === "little" ? i : wordBytes - 1 - i),
  );
  const totals = weights.map((_, place) => {
    let total = 0;
    for (let i = place; i < bytes.length; i += wordBytes) total += bytes[i];
    return total;
  });
  return totals.reduce((sum, total, place) => sum + (total % (2 ** 32 / weights[place])) * weights[place], 0);
}
