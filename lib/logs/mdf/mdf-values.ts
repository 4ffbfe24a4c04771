import { halfToNumber } from "@/lib/format/half-float";
import type { MdfChannel } from "@/lib/logs/mdf/mdf-tree";

/** Rows of equal size: where they lie and how many there are. */
export interface RecordRows {
  bytes: Uint8Array;
  /** Bytes from one record to the next, invalidation bytes included. */
  stride: number;
  rows: number;
  /** Bytes of a record before its invalidation bytes. */
  dataBytes: number;
}

const TWO_32 = 4_294_967_296;

/** Values of whole bytes; a loop for each width, since one loop with a reader passed in is several times slower. */
function readWhole(records: RecordRows, first: number, kind: string, le: boolean): Float64Array | null {
  const { bytes, stride, rows } = records;
  const v = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const out = new Float64Array(rows);
  const low = le ? 0 : 4;
  const high = 4 - low;
  let p = first;
  switch (kind) {
    case "unsigned 8":
      for (let i = 0; i < rows; i++, p += stride) out[i] = bytes[p];
      return out;
    case "unsigned 16":
      for (let i = 0; i < rows; i++, p += stride) out[i] = v.getUint16(p, le);
      return out;
    case "unsigned 32":
      for (let i = 0; i < rows; i++, p += stride) out[i] = v.getUint32(p, le);
      return out;
    case "unsigned 64":
      for (let i = 0; i < rows; i++, p += stride)
        out[i] = v.getUint32(p + low, le) + TWO_32 * v.getUint32(p + high, le);
      return out;
    case "signed 8":
      for (let i = 0; i < rows; i++, p += stride) out[i] = v.getInt8(p);
      return out;
    case "signed 16":
      for (let i = 0; i < rows; i++, p += stride) out[i] = v.getInt16(p, le);
      return out;
    case "signed 32":
      for (let i = 0; i < rows; i++, p += stride) out[i] = v.getInt32(p, le);
      return out;
    case "signed 64":
      for (let i = 0; i < rows; i++, p += stride)
        out[i] = v.getUint32(p + low, le) + TWO_32 * v.getInt32(p + high, le);
      return out;
    case "float 16":
      for (let i = 0; i < rows; i++, p += stride) out[i] = halfToNumber(v.getUint16(p, le));
      return out;
    case "float 32":
      for (let i = 0; i < rows; i++, p += stride) out[i] = v.getFloat32(p, le);
      return out;
    case "float 64":
      for (let i = 0; i < rows; i++, p += stride) out[i] = v.getFloat64(p, le);
      return out;
    default:
      return null;
  }
}

/** Integers of any width and place: the bytes are put in order, shifted and cut; up to 64 bits. */
function readBits(records: RecordRows, channel: MdfChannel, signed: boolean, le: boolean): Float64Array {
  const { bytes, stride, rows } = records;
  const { byteOffset, bitOffset, bitCount } = channel;
  const width = Math.ceil((bitOffset + bitCount) / 8);
  const out = new Float64Array(rows);
  const shift = BigInt(bitOffset);
  const short = bitOffset + bitCount <= 31;
  const mask = short ? 2 ** bitCount - 1 : 0;
  const limit = 2 ** (bitCount - 1);
  for (let i = 0, at = byteOffset; i < rows; i++, at += stride) {
    let value: number;
    if (short) {
      let word = 0;
      for (let k = 0; k < width; k++) word |= bytes[at + (le ? k : width - 1 - k)] << (8 * k);
      value = (word >>> bitOffset) & mask;
    } else {
      let word = 0n;
      for (let k = 0; k < width; k++) word |= BigInt(bytes[at + (le ? k : width - 1 - k)]) << BigInt(8 * k);
      const cut = word >> shift;
      value = Number(signed ? BigInt.asIntN(bitCount, cut) : BigInt.asUintN(bitCount, cut));
    }
    out[i] = short && signed && value >= limit ? value - 2 * limit : value;
  }
  return out;
}

/** A channel's type without byte order, or what it holds instead of numbers. Data types of MDF 4: 0 to 5 are numbers. */
function numberKind(dataType: number): { word: "unsigned" | "signed" | "float"; little: boolean } | null {
  if (dataType > 5) return null;
  const word = dataType < 2 ? "unsigned" : dataType < 4 ? "signed" : "float";
  return { word, little: dataType % 2 === 0 };
}

const OTHER_TYPES: Readonly<Record<number, string>> = {
  10: "bytes without a meaning of their own",
  11: "a MIME sample",
  12: "a MIME stream",
  13: "a CANopen date",
  14: "a CANopen time",
  15: "complex numbers",
  16: "complex numbers",
};

/** True for the data types that hold text (6 to 9) . */
export function isText(channel: MdfChannel): boolean {
  return channel.dataType >= 6 && channel.dataType <= 9;
}

/** Why a channel gives no numbers, as the end of a sentence; null when it does. Text is asked with `isText`. */
export function whyNoNumbers(channel: MdfChannel, dataBytes: number): string | null {
  if (channel.isArray) return "is an array, and arrays are not read";
  if (channel.type === 4) return "marks places in another medium";
  if (channel.type === 3 || channel.type === 6) return null;
  const kind = numberKind(channel.dataType);
  if (!kind || channel.type === 1 || channel.type === 5)
    return `holds ${OTHER_TYPES[channel.dataType] ?? `values of data type ${channel.dataType}`}, which are not read`;
  const { bitCount, bitOffset, byteOffset } = channel;
  if (kind.word === "float" && (![16, 32, 64].includes(bitCount) || bitOffset !== 0))
    return `is a number of ${bitCount} bits at bit ${bitOffset}, which no standard describes`;
  if (bitCount < 1 || bitCount > 64 || bitOffset > 7) return `states ${bitCount} bits at bit ${bitOffset}`;
  if (byteOffset + Math.ceil((bitOffset + bitCount) / 8) > dataBytes) return "lies outside its record";
  return null;
}

/** Marks values as missing that the file calls invalid: all of them, or those with their bit set. */
function applyInvalidation(values: Float64Array, records: RecordRows, channel: MdfChannel): void {
  if (channel.flags & 1) values.fill(Number.NaN);
  if (!(channel.flags & 2)) return;
  const { bytes, stride, rows, dataBytes } = records;
  const at = dataBytes + (channel.invalidationBit >> 3);
  if (at >= stride) return;
  const bit = 1 << (channel.invalidationBit & 7);
  for (let i = 0; i < rows; i++) if (bytes[i * stride + at] & bit) values[i] = Number.NaN;
}

/**
 * Raw values of a number channel, one a record; NaN where the file marks a value as invalid. A virtual channel counts the records
 * from 0. Ask `whyNoNumbers` first. Integers beyond 2^53 are rounded to the nearest double.
 */
export function readNumbers(records: RecordRows, channel: MdfChannel): Float64Array {
  const values = rawNumbers(records, channel);
  applyInvalidation(values, records, channel);
  return values;
}

function rawNumbers(records: RecordRows, channel: MdfChannel): Float64Array {
  if (channel.type === 3 || channel.type === 6)
    return Float64Array.from({ length: records.rows }, (_, i) => i);
  const kind = numberKind(channel.dataType);
  const little = kind?.little ?? true;
  if (channel.bitOffset === 0) {
    const whole = readWhole(records, channel.byteOffset, `${kind?.word} ${channel.bitCount}`, little);
    if (whole) return whole;
  }
  return readBits(records, channel, kind?.word === "signed", little);
}
