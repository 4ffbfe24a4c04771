import {
  type Alignments,
  type AxisLetter,
  type ByteOrder,
  DATA_TYPES,
  type DataType,
  type LayoutComponent,
  type RecordLayout,
} from "@/lib/calibration/a2l/types";
import {
  alignTo,
  type CellPlaces,
  cellPlaces,
  type Series,
} from "@/lib/calibration/values/memory/cell-places";
import type { ImageMemory } from "@/lib/calibration/values/memory/image-memory";
import { readNumber } from "@/lib/calibration/values/memory/read-number";
import { NotReadable } from "@/lib/calibration/values/not-readable";
import type { ByteRange } from "@/lib/calibration/values/types";

/** One axis of a record, before its place is known. */
export interface AxisNeed {
  letter: AxisLetter;
  /** Most points, from the description; places of a static layout rest on it. */
  max: number;
  /** Points in use, where another thing tells it (shared, fixed, curve axis); null = the record tells it. */
  used: number | null;
}

export interface PlacedRecord {
  /** Points in use by axis, in the order of the axes asked for. */
  counts: number[];
  axes: Partial<Record<AxisLetter, Series>>;
  cells: CellPlaces | null;
  /** AXIS_RESCALE_X: axis value and virtual index alternate. */
  rescale: Series | null;
  /** OFFSET_, SHIFT_OP_, DIST_OP_ of fixed axes, by keyword with letter. */
  parameters: ReadonlyMap<string, Series>;
  /** Bytes that carry values, counts and points; not reserved ones. */
  bytes: ByteRange[];
}

export interface RecordRequest {
  layout: RecordLayout;
  address: number;
  order: ByteOrder;
  /** Of the module; the layout's own override them. */
  alignments: Alignments;
  memory: ImageMemory;
  axes: readonly AxisNeed[];
  /** Cells by axis where no axis tells them (blocks); null where axes do. */
  dims: readonly number[] | null;
}

/** Greatest number of points of one axis; larger statements are damage. */
const MOST_POINTS = 65_535;
const COMPONENT = /^(NO_AXIS_PTS|AXIS_PTS|NO_RESCALE|AXIS_RESCALE|OFFSET|SHIFT_OP|DIST_OP)_([XYZ45])$/;

/**
 * Walks a record layout from its address on and says where everything lies. The first component starts at the address as it
 * is; each further one is aligned to its type (natural alignment where nothing is stated: from memory). Throws NotReadable.
 */
export function placeRecord(request: RecordRequest): PlacedRecord {
  const { layout, memory, order } = request;
  const counts = new Map<AxisLetter, number>();
  const placed = {
    axes: {} as PlacedRecord["axes"],
    parameters: new Map<string, Series>(),
    bytes: [] as ByteRange[],
  };
  let cells: CellPlaces | null = null;
  let rescale: Series | null = null;
  let pairs: number | null = null;
  let at = request.address;
  const alternate = layout.components.find(({ keyword }) => keyword === "FNC_VALUES")?.indexMode ?? "ROW_DIR";
  const alternateLetter =
    alternate === "ALTERNATE_WITH_X" ? "X" : alternate === "ALTERNATE_WITH_Y" ? "Y" : null;

  const used = (letter: AxisLetter) => counts.get(letter) ?? settle(request, letter, null, counts);
  const most = (letter: AxisLetter) =>
    Math.max(used(letter), request.axes.find((axis) => axis.letter === letter)?.max ?? 0);
  // Places inside the function values, and room that is kept for a component: only a static layout keeps the rows of a map apart as
  // well, static offsets keep where each component begins (from memory of ASAP2 1.7).
  const apart = layout.isStatic ? most : used;
  const kept = layout.isStatic || layout.keepsStarts ? most : used;
  const take = (start: number, length: number) => {
    if (length > 0) placed.bytes.push({ address: start, length });
  };
  const stored = (component: LayoutComponent, start: number) => {
    const size = DATA_TYPES[component.dataType];
    take(start, size);
    const { view, offset } = memory.at(start, size);
    return Number(readNumber(view, offset, component.dataType, order));
  };

  for (const [k, component] of layout.components.entries()) {
    const { keyword, dataType } = component;
    const size = DATA_TYPES[dataType];
    const before = at;
    const start = k === 0 ? at : alignTo(at, alignmentOf(request, dataType));
    const [, kind, letter] = COMPONENT.exec(keyword) ?? [null, keyword, "X"];
    const axis = letter as AxisLetter;
    at = start + size;
    if (kind === "NO_AXIS_PTS") {
      const own = request.axes.find((need) => need.letter === axis && need.used === null);
      if (own && !counts.has(axis)) settle(request, axis, stored(component, start), counts);
    } else if (kind === "NO_RESCALE") pairs = stored(component, start);
    else if (kind === "AXIS_RESCALE") {
      rescale = rescalePairs(component, start, pairs);
      take(start, rescale.count * size);
      at = start + 2 * (component.maxPairs ?? 0) * size;
    } else if (kind === "OFFSET" || kind === "SHIFT_OP" || kind === "DIST_OP") {
      placed.parameters.set(keyword, { type: dataType, address: start, stride: size, count: 1 });
      take(start, size);
    } else if (kind === "AXIS_PTS" && axis !== alternateLetter) {
      waitForCount(layout, k, axis, request, counts);
      const count = used(axis);
      placed.axes[axis] = turned({ type: dataType, address: start, stride: size, count }, component);
      take(start, count * size);
      at = start + kept(axis) * size;
    } else if (kind === "FNC_VALUES" || (kind === "AXIS_PTS" && axis === alternateLetter)) {
      if (cells) {
        at = before;
        continue;
      }
      for (const need of request.axes) waitForCount(layout, k, need.letter, request, counts);
      const cellsBy = (count: typeof used) =>
        request.dims ?? request.axes.map(({ letter: own }) => count(own));
      const alignment = (type: DataType) => alignmentOf(request, type);
      const values = { layout, start, alignment };
      const result = cellPlaces({ ...values, dims: cellsBy(used), reserved: cellsBy(apart) });
      cells = result.cells;
      if (result.axis) placed.axes[result.axis.letter] = result.axis.series;
      take(start, result.length);
      at = start + cellPlaces({ ...values, dims: cellsBy(used), reserved: cellsBy(kept) }).reservedLength;
    }
  }
  return { ...placed, counts: request.axes.map(({ letter }) => used(letter)), cells, rescale };
}

/** A falling series begins at its last place and goes down. */
function turned(series: Series, component: LayoutComponent): Series {
  if (component.indexOrder !== "INDEX_DECR") return series;
  return { ...series, address: series.address + (series.count - 1) * series.stride, stride: -series.stride };
}

/** Settles how many points an axis has: told elsewhere, else stored, else fixed by the layout, else the description's most. */
function settle(
  { axes, layout }: RecordRequest,
  letter: AxisLetter,
  stored: number | null,
  counts: Map<AxisLetter, number>,
): number {
  const need = axes.find((axis) => axis.letter === letter);
  const fixed = layout.fixedCounts[letter];
  if (!need) return fixed ?? 0;
  const count = need.used ?? stored ?? fixed ?? need.max;
  const most = Math.min(MOST_POINTS, need.used === null && stored !== null ? need.max : MOST_POINTS);
  if (!Number.isInteger(count) || count < 1 || count > most) {
    const where = stored === null ? "the description states" : "it states";
    throw new NotReadable(
      `${where} ${count} points for axis ${letter.toLowerCase()}, ${count < 1 ? "at least 1 is needed" : `at most ${most} are possible`}`,
    );
  }
  counts.set(letter, count);
  return count;
}

/** Without a static layout nothing can be placed behind points whose number comes later. */
function waitForCount(
  layout: RecordLayout,
  from: number,
  letter: AxisLetter,
  { axes }: RecordRequest,
  counts: ReadonlyMap<AxisLetter, number>,
): void {
  const own = axes.some((axis) => axis.letter === letter && axis.used === null);
  if (!own || counts.has(letter)) return;
  if (layout.components.slice(from).some(({ keyword }) => keyword === `NO_AXIS_PTS_${letter}`)) {
    throw new NotReadable(
      `its layout ${layout.name} stores the number of points of axis ${letter.toLowerCase()} behind what it tells the size of`,
    );
  }
}

function rescalePairs(component: LayoutComponent, start: number, stored: number | null): Series {
  const most = component.maxPairs ?? 0;
  const pairs = stored ?? most;
  if (!Number.isInteger(pairs) || pairs < 1 || pairs > most) {
    throw new NotReadable(`it states ${pairs} rescale pairs, ${most} are possible`);
  }
  return {
    type: component.dataType,
    address: start,
    stride: DATA_TYPES[component.dataType],
    count: 2 * pairs,
  };
}

function alignmentOf({ layout, alignments }: RecordRequest, type: DataType): number {
  return layout.alignments[type] ?? alignments[type] ?? DATA_TYPES[type];
}
