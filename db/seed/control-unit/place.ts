import { BOOST } from "@/db/seed/control-unit/boost";
import { FUEL } from "@/db/seed/control-unit/fuel";
import { IGNITION } from "@/db/seed/control-unit/ignition";
import {
  type Axis,
  dimsOf,
  type Item,
  SHARED_AXES,
  type SharedAxisName,
  SPREAD_MOST_PAIRS,
} from "@/db/seed/control-unit/item";
import { LIMITER } from "@/db/seed/control-unit/limiter";
import { TORQUE } from "@/db/seed/control-unit/torque";
import { DATA_TYPES, type DataType } from "@/lib/calibration/a2l/types";
import type { ChecksumRegion } from "@/lib/calibration/image/checksum-regions";
import { CRC32_DEFAULT } from "@/lib/calibration/image/cyclic-redundancy";
import { cellCount } from "@/lib/calibration/values/cells";

/** Memory of the invented control unit. The checksum's four bytes end it and are not part of what they cover. */
export const MEMORY = {
  base: 0x80_0000,
  code: { name: "Program", address: 0x80_0000, length: 0x4000 },
  data: { name: "Calibration", address: 0x80_4000, length: 0x4000 },
  epk: { address: 0x80_4000, text: "MARLIN-20T/3.12" },
  firstItem: 0x80_4020,
  checksumAt: 0x80_7ffc,
} as const;
/** What the last four bytes state, as a programme declares it. */
export const CHECKSUM_REGION = {
  ...{ name: "Calibration data", algorithm: "crc32", parameters: CRC32_DEFAULT, byteOrder: "little" },
  ...{ from: MEMORY.data.address, to: MEMORY.checksumAt - 1, storedAt: MEMORY.checksumAt, expected: null },
} satisfies ChecksumRegion;
export const IMAGE_BYTES = MEMORY.code.length + MEMORY.data.length;

/** Everything that has a place of its own, in the order in which it lies in memory. */
export const ITEMS: readonly Item[] = [...BOOST, ...FUEL, ...IGNITION, ...TORQUE, ...LIMITER];

/** One part of a record: what RECORD_LAYOUT calls it, its type, and how many numbers of it lie there. */
export interface Part {
  keyword: string;
  type: DataType;
  count: number;
}

const LETTERS = ["X", "Y", "Z"] as const;

/** Parts of an item's record: counts of its own axes, their points, then the values. */
export function partsOf(item: Item): readonly Part[] {
  const own = (item.axes ?? []).flatMap((axis: Axis, at) =>
    axis.kind === "own" ? [{ letter: LETTERS[at], type: axis.type, count: axis.points.length }] : [],
  );
  const cells = cellCount(dimsOf(item));
  return [
    ...own.map(({ letter }): Part => ({ keyword: `NO_AXIS_PTS_${letter}`, type: "UBYTE", count: 1 })),
    ...own.map(({ letter, type, count }): Part => ({ keyword: `AXIS_PTS_${letter}`, type, count })),
    { keyword: "FNC_VALUES", type: item.type, count: item.characters?.bytes ?? cells },
  ];
}

/** Parts of a shared axis; memory is kept for the most points that it may have. */
export function partsOfAxis(name: SharedAxisName): readonly Part[] {
  const { type, most } = SHARED_AXES[name];
  return [
    { keyword: "NO_AXIS_PTS_X", type: "UBYTE", count: 1 },
    { keyword: "AXIS_PTS_X", type, count: most },
  ];
}

export const SPREAD_PARTS: readonly Part[] = [
  { keyword: "NO_RESCALE_X", type: "UBYTE", count: 1 },
  { keyword: "RESERVED", type: "UBYTE", count: 1 },
  { keyword: "AXIS_RESCALE_X", type: "UWORD", count: 2 * SPREAD_MOST_PAIRS },
];

/** Every number begins at a multiple of its size. */
const alignedTo = (address: number, type: DataType): number =>
  Math.ceil(address / DATA_TYPES[type]) * DATA_TYPES[type];

/** Address at which each part begins, and the first one behind them. */
export function placesOf(parts: readonly Part[], from: number): { starts: readonly number[]; end: number } {
  let end = from;
  const starts = parts.map(({ type, count }) => {
    const start = alignedTo(end, type);
    end = start + count * DATA_TYPES[type];
    return start;
  });
  return { starts, end };
}

/** Addresses by name: shared axes first, then the items; what is virtual has none. */
const ADDRESSES: ReadonlyMap<string, number> = (() => {
  const addresses = new Map<string, number>();
  let at: number = MEMORY.firstItem;
  const put = (name: string, parts: readonly Part[]) => {
    addresses.set(name, at);
    at = Math.ceil(placesOf(parts, at).end / 4) * 4;
  };
  for (const name of Object.keys(SHARED_AXES) as SharedAxisName[]) put(name, partsOfAxis(name));
  put("Axis.Speed_spread", SPREAD_PARTS);
  for (const item of ITEMS) if (item.derived?.kind !== "virtual") put(item.name, partsOf(item));
  return addresses;
})();

/** The address of something that has one. */
export function addressOf(name: string): number {
  const address = ADDRESSES.get(name);
  if (address === undefined) throw new Error(`${name} has no address`);
  return address;
}
