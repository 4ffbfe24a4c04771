import { type AxisLetter, DATA_TYPES, type DataType, type RecordLayout } from "@/lib/calibration/a2l/types";
import { cellCount } from "@/lib/calibration/values/cells";
import { NotReadable } from "@/lib/calibration/values/not-readable";

/** Equally spaced numbers in memory. */
export interface Series {
  type: DataType;
  address: number;
  stride: number;
  count: number;
}

/** Cells of a record: the address of cell (x, y, z …) is `address` + x·strides[0] + y·strides[1] + … */
export interface CellPlaces {
  type: DataType;
  address: number;
  strides: number[];
  dims: number[];
}

interface Request {
  layout: RecordLayout;
  start: number;
  dims: readonly number[];
  /** Cells by axis that memory is kept for: `dims`, or more in a static layout. */
  reserved: readonly number[];
  alignment(type: DataType): number;
}

interface Result {
  cells: CellPlaces;
  axis: { letter: AxisLetter; series: Series } | null;
  /** Bytes from the start to the last one in use, and to the last one kept. */
  length: number;
  reservedLength: number;
}

/** Most cells of one characteristic; checked before anything is allocated. */
const MOST_CELLS = 1 << 20;

/**
 * Where the function values lie. ROW_DIR: x runs fastest; COLUMN_DIR: y runs fastest, then x; further axes are outside in both.
 * ALTERNATE_WITH_X (_Y): each point of that axis is followed by its values. A curve whose own points run down (INDEX_DECR) has its
 * values run down too; with more axes the values keep the order of addresses (as the outside values of the demonstration image have
 * it). Throws NotReadable.
 */
export function cellPlaces(request: Request): Result {
  const { layout, start, dims, reserved } = request;
  const values = layout.components.find(({ keyword }) => keyword === "FNC_VALUES");
  if (!values) throw new NotReadable(`its layout ${layout.name} has no function values`);
  const cells = cellCount(dims);
  const kept = cellCount(reserved);
  if (!(kept <= MOST_CELLS) || !Number.isInteger(cells) || cells < 1) {
    throw new NotReadable(
      `it states ${kept} cells, ${kept < 1 ? "at least 1 is needed" : `at most ${MOST_CELLS} are read`}`,
    );
  }
  const size = DATA_TYPES[values.dataType];
  const mode = values.indexMode ?? "ROW_DIR";
  if (mode === "ALTERNATE_WITH_X" || mode === "ALTERNATE_WITH_Y") {
    return alternating(request, mode === "ALTERNATE_WITH_X" ? 0 : 1, values.dataType);
  }
  if (mode === "ALTERNATE_CURVES") {
    throw new NotReadable(
      "its values alternate with those of other curves (ALTERNATE_CURVES), whose number the description does not state",
    );
  }
  const inner = mode === "COLUMN_DIR" && dims.length > 1 ? [1, 0] : [0, 1];
  const order = dims.map((_, k) => (k < 2 && dims.length > 1 ? inner[k] : k));
  const strides = new Array<number>(dims.length).fill(0);
  let stride = size;
  for (const k of order) {
    strides[k] = stride;
    stride *= reserved[k];
  }
  const last = dims.reduce((sum, n, k) => sum + (n - 1) * strides[k], 0);
  const places: CellPlaces = { type: values.dataType, address: start, strides, dims: [...dims] };
  const falls = layout.components.some((c) => c.keyword === "AXIS_PTS_X" && c.indexOrder === "INDEX_DECR");
  if (dims.length === 1 && falls) {
    places.address += last;
    places.strides = [-size];
  }
  return { cells: places, axis: null, length: last + size, reservedLength: size * kept };
}

/** Blocks of one axis point and the values at it; all blocks must be alike. */
function alternating(
  { layout, start, dims, reserved, alignment }: Request,
  along: number,
  type: DataType,
): Result {
  const letter: AxisLetter = along === 0 ? "X" : "Y";
  const points = layout.components.find(({ keyword }) => keyword === `AXIS_PTS_${letter}`);
  if (!points || dims.length <= along || dims.length > 2) {
    throw new NotReadable(
      `its layout ${layout.name} lets values alternate with an axis ${letter.toLowerCase()} that it does not have`,
    );
  }
  const [pointSize, valueSize] = [DATA_TYPES[points.dataType], DATA_TYPES[type]];
  const perPoint = dims.length === 1 ? 1 : reserved[1 - along];
  const first = alignTo(start + pointSize, alignment(type)) - start;
  const block = alignTo(start + first + perPoint * valueSize, alignment(points.dataType)) - start;
  const second = alignTo(start + block + pointSize, alignment(type)) - start;
  if (dims[along] > 1 && second !== block + first) {
    throw new NotReadable("its points and values alternate with gaps that are not alike from point to point");
  }
  const strides = dims.map((_, k) => (k === along ? block : valueSize));
  const down = points.indexOrder === "INDEX_DECR";
  const end = (dims[along] - 1) * block;
  if (down && dims.length === 1) strides[along] = -block;
  const base = down && dims.length === 1 ? end : 0;
  const used = dims.length === 1 ? 1 : dims[1 - along];
  return {
    cells: { type, address: start + first + base, strides, dims: [...dims] },
    axis: {
      letter,
      series: {
        type: points.dataType,
        address: start + (down ? end : 0),
        stride: down ? -block : block,
        count: dims[along],
      },
    },
    length: end + first + used * valueSize,
    reservedLength: (reserved[along] - 1) * block + first + perPoint * valueSize,
  };
}

/** The next address that `alignment` divides; an alignment below 2 or not whole leaves the address. */
export function alignTo(address: number, alignment: number): number {
  return Number.isInteger(alignment) && alignment > 1 ? Math.ceil(address / alignment) * alignment : address;
}
