import { type ByteOrder, DATA_TYPES } from "@/lib/calibration/a2l/types";
import { cellCount } from "@/lib/calibration/values/cells";
import type { CellPlaces } from "@/lib/calibration/values/memory/cell-places";
import { type Raw, readNumber } from "@/lib/calibration/values/memory/read-number";
import { type ReadingContext, spendCells } from "@/lib/calibration/values/reading-context";

/** Reads all cells in logical order, x fastest. Throws NotReadable where the image does not have all their bytes. */
export function readCells(context: ReadingContext, cells: CellPlaces, order: ByteOrder): Raw[] {
  const { type, address, strides, dims } = cells;
  const total = cellCount(dims);
  spendCells(context, total);
  let low = address;
  let high = address;
  for (const [k, n] of dims.entries()) {
    const reach = (n - 1) * strides[k];
    if (reach < 0) low += reach;
    else high += reach;
  }
  const { view, offset } = context.memory.at(low, high - low + DATA_TYPES[type]);
  const [along, step] = [dims[0] ?? 1, strides[0] ?? 0];
  const index = dims.map(() => 0);
  const raw: Raw[] = new Array(total);
  let row = offset + address - low;
  for (let cell = 0; cell < total; ) {
    for (let k = 0; k < along; k++) raw[cell++] = readNumber(view, row + k * step, type, order);
    for (let k = 1; k < dims.length; k++) {
      row += strides[k];
      if (++index[k] < dims[k]) break;
      row -= dims[k] * strides[k];
      index[k] = 0;
    }
  }
  return raw;
}
