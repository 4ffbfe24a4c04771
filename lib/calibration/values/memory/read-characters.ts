import { type ByteOrder, DATA_TYPES } from "@/lib/calibration/a2l/types";
import type { CellPlaces } from "@/lib/calibration/values/memory/cell-places";
import { readCells } from "@/lib/calibration/values/memory/read-cells";
import { isFloat } from "@/lib/calibration/values/memory/read-number";
import { NotReadable } from "@/lib/calibration/values/not-readable";
import type { ReadingContext } from "@/lib/calibration/values/reading-context";
import type { ByteRange } from "@/lib/calibration/values/types";

/**
 * The characters of an ASCII characteristic up to the first NUL, and the bytes they rest on with that NUL; what lies behind it has
 * no meaning. Bytes are read as UTF-8 where they are valid UTF-8, else as Latin-1; wider cells as UTF-16 or UTF-32 code units.
 */
export function readCharacters(
  context: ReadingContext,
  cells: CellPlaces,
  order: ByteOrder,
): { characters: string; bytes: ByteRange } {
  if (isFloat(cells.type)) throw new NotReadable("it is a text made of floating-point numbers");
  const codes = readCells(context, cells, order).map(Number);
  const nul = codes.indexOf(0);
  const used = nul < 0 ? codes : codes.slice(0, nul);
  const size = DATA_TYPES[cells.type];
  const length = (nul < 0 ? codes.length : nul + 1) * size;
  return {
    characters: size === 1 ? fromBytes(used) : fromUnits(used),
    bytes: { address: cells.address, length },
  };
}

function fromBytes(codes: readonly number[]): string {
  const bytes = Uint8Array.from(codes, (code) => code & 0xff);
  try {
    return new TextDecoder("utf-8", { fatal: true, ignoreBOM: true }).decode(bytes);
  } catch {
    return Array.from(bytes, (byte) => String.fromCharCode(byte)).join("");
  }
}

function fromUnits(codes: readonly number[]): string {
  return codes
    .map((code) => (code >= 0 && code <= 0x10ffff ? String.fromCodePoint(code) : "\uFFFD"))
    .join("");
}
