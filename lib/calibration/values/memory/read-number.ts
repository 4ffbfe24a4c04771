import { type ByteOrder, DATA_TYPES, type DataType } from "@/lib/calibration/a2l/types";
import { NotReadable } from "@/lib/calibration/values/not-readable";
import { halfToNumber } from "@/lib/format/half-float";

/** A number as it lies in memory: bigint for 64-bit whole numbers, else number. */
export type Raw = number | bigint;

const WORD = 2;
const scratch = new DataView(new ArrayBuffer(8));

/** Reads one number at `offset` of a view. */
export function readNumber(view: DataView, offset: number, type: DataType, order: ByteOrder): Raw {
  if (order === "little") return read(view, offset, type, true);
  if (order === "big") return read(view, offset, type, false);
  const size = DATA_TYPES[type];
  const little = order === "little_words_swapped";
  for (let k = 0; k < size; k++) {
    const from = size <= WORD ? k : size - WORD - (k - (k % WORD)) + (k % WORD);
    scratch.setUint8(k, view.getUint8(offset + from));
  }
  return read(scratch, 0, type, little);
}

function read(view: DataView, at: number, type: DataType, little: boolean): Raw {
  switch (type) {
    case "UBYTE":
      return view.getUint8(at);
    case "SBYTE":
      return view.getInt8(at);
    case "UWORD":
      return view.getUint16(at, little);
    case "SWORD":
      return view.getInt16(at, little);
    case "ULONG":
      return view.getUint32(at, little);
    case "SLONG":
      return view.getInt32(at, little);
    case "A_UINT64":
      return view.getBigUint64(at, little);
    case "A_INT64":
      return view.getBigInt64(at, little);
    case "FLOAT16_IEEE":
      return halfToNumber(view.getUint16(at, little));
    case "FLOAT32_IEEE":
      return view.getFloat32(at, little);
    case "FLOAT64_IEEE":
      return view.getFloat64(at, little);
  }
}

/** True for FLOAT16_IEEE, FLOAT32_IEEE and FLOAT64_IEEE. */
export function isFloat(type: DataType): boolean {
  return type.startsWith("FLOAT");
}

/**
 * Takes the bits of a mask out of a whole number and moves them down to bit 0. A mask over the whole width leaves the
 * number, and so its sign, alone. Throws NotReadable for an empty mask and for floats.
 */
export function applyMask(type: DataType, mask: bigint | null): (raw: Raw) => Raw {
  if (mask === null) return (raw) => raw;
  const width = 8 * DATA_TYPES[type];
  const all = (1n << BigInt(width)) - 1n;
  const bits = mask & all;
  if (bits === all) return (raw) => raw;
  if (bits === 0n) throw new NotReadable("its bit mask leaves no bit of the number");
  if (isFloat(type)) throw new NotReadable("it has a bit mask over a floating-point number");
  let shift = 0n;
  while (((bits >> shift) & 1n) === 0n) shift++;
  if (width > 32) return (raw) => (BigInt.asUintN(width, BigInt(raw)) & bits) >> shift;
  const [low, down] = [Number(bits), Number(shift)];
  return (raw) => ((Number(raw) & low) >>> 0) >>> down;
}

/** The exact raw number for JSON: a number, or text where JSON would lose something (beyond 2^53, −0, infinities, NaN). */
export function exactRaw(raw: Raw): number | string {
  if (typeof raw === "bigint") {
    const near = Number(raw);
    return Number.isSafeInteger(near) ? near : raw.toString();
  }
  return Number.isFinite(raw) && !Object.is(raw, -0) ? raw : Object.is(raw, -0) ? "-0" : String(raw);
}
