import type { DataType } from "@/lib/calibration/a2l/types";
import type { Converter, Limits } from "@/lib/calibration/values/convert/converter";
import { isFloat, type Raw } from "@/lib/calibration/values/memory/read-number";
import type { ByteRange } from "@/lib/calibration/values/types";

const MOST_DECIMALS = 6;
/** Shown where neither FORMAT nor conversion says anything and the values are no whole numbers. */
const USUAL_DECIMALS = 3;

/** Decimals to show, 0 to 6: those of a FORMAT such as "%8.3", else the conversion's, else none for raw whole numbers. */
export function decimalsOf(format: string | null, converter: Converter, type: DataType): number {
  const stated = format === null ? null : /^\s*%?\d*\.(\d+)/.exec(format);
  const plain = converter.unit === "" && converter.decimals === null && !isFloat(type);
  const decimals = stated ? Number(stated[1]) : (converter.decimals ?? (plain ? 0 : USUAL_DECIMALS));
  return Math.max(0, Math.min(MOST_DECIMALS, Math.trunc(decimals)));
}

/**
 * Size of one raw step in physical units, at the middle between the least and the greatest raw number read. Null for floats, words
 * and separate table entries, and where the conversion has no number there.
 */
export function stepOf(
  converter: Converter,
  raw: readonly Raw[],
  limits: Limits,
  type: DataType,
): number | null {
  if (!converter.stepped || isFloat(type) || raw.length === 0) return null;
  let [low, high] = [Infinity, -Infinity];
  for (const value of raw) {
    low = Math.min(low, Number(value));
    high = Math.max(high, Number(value));
  }
  const middle = Math.floor((low + high) / 2);
  const [from, to] = [converter.toPhysical(middle, limits), converter.toPhysical(middle + 1, limits)];
  return typeof from === "number" && typeof to === "number" ? Math.abs(to - from) : null;
}

/** Stretches of bytes in rising order, joined where they touch or overlap. */
export function joinRanges(ranges: readonly ByteRange[]): ByteRange[] {
  const joined: ByteRange[] = [];
  for (const { address, length } of [...ranges].sort((a, b) => a.address - b.address)) {
    const last = joined[joined.length - 1];
    if (last && address <= last.address + last.length) {
      last.length = Math.max(last.length, address + length - last.address);
    } else joined.push({ address, length });
  }
  return joined;
}
