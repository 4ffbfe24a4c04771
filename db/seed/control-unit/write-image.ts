import { crc32 } from "node:zlib";
import {
  type Axis,
  dimsOf,
  type Item,
  SHARED_AXES,
  type SharedAxisName,
  SPREAD_PAIRS,
} from "@/db/seed/control-unit/item";
import {
  addressOf,
  IMAGE_BYTES,
  ITEMS,
  MEMORY,
  type Part,
  partsOf,
  partsOfAxis,
  placesOf,
  SPREAD_PARTS,
} from "@/db/seed/control-unit/place";
import { rawOf, type ScaleName } from "@/db/seed/control-unit/scales";
import { DATA_TYPES, type DataType } from "@/lib/calibration/a2l/types";
import { randomStream } from "@/lib/signal/random";

const ERASED = 0xff;
/** Bits beside a masked one, which belong to something that the description does not tell. */
const OTHER_BITS = 0x83;

function writeNumber(bytes: Buffer, type: DataType, at: number, value: number): void {
  if (type === "FLOAT32_IEEE") bytes.writeFloatLE(value, at);
  else if (type === "SBYTE" || type === "SWORD") bytes.writeIntLE(value, at, DATA_TYPES[type]);
  else bytes.writeUIntLE(value, at, DATA_TYPES[type]);
}

/** Numbers of each part, one list a part. */
function writeParts(
  bytes: Buffer,
  from: number,
  parts: readonly Part[],
  numbers: readonly (readonly number[])[],
): void {
  const { starts } = placesOf(parts, from);
  parts.forEach(({ type }, part) => {
    numbers[part].forEach((value, i) => {
      writeNumber(bytes, type, starts[part] - MEMORY.base + i * DATA_TYPES[type], value);
    });
  });
}

const rawPoints = (points: readonly number[], scale: ScaleName, type: DataType) =>
  points.map((point) => rawOf(scale, type, point));

/** Raw values in the order in which they lie: x fastest, or y where the item is kept column by column. */
function rawCells(item: Item): number[] {
  const { scale, type, values = [], byColumn, bitMask } = item;
  const raw = values.map((value) => rawOf(scale, type, value));
  if (bitMask !== undefined) return raw.map((value) => OTHER_BITS | (value * (bitMask & -bitMask)));
  const [columns, rows] = dimsOf(item);
  if (!byColumn || rows === undefined) return raw;
  return Array.from({ length: raw.length }, (_, i) => raw[Math.floor(i / rows) + columns * (i % rows)]);
}

function writeItem(bytes: Buffer, item: Item): void {
  if (item.derived?.kind === "virtual") return;
  const own = (item.axes ?? []).filter((axis): axis is Extract<Axis, { kind: "own" }> => axis.kind === "own");
  const text = item.characters && Buffer.alloc(item.characters.bytes, 0);
  text?.write(item.characters?.text ?? "", "latin1");
  writeParts(bytes, addressOf(item.name), partsOf(item), [
    ...own.map(({ points }) => [points.length]),
    ...own.map(({ points, scale, type }) => rawPoints(points, scale, type)),
    text ? [...text] : rawCells(item),
  ]);
}

function writeSharedAxes(bytes: Buffer): void {
  for (const name of Object.keys(SHARED_AXES) as SharedAxisName[]) {
    const { points, scale, type } = SHARED_AXES[name];
    writeParts(bytes, addressOf(name), partsOfAxis(name), [[points.length], rawPoints(points, scale, type)]);
  }
  const pairs = SPREAD_PAIRS.flatMap(([rpm, place]) => [rawOf("Speed_rpm", "UWORD", rpm), place]);
  writeParts(bytes, addressOf("Axis.Speed_spread"), SPREAD_PARTS, [[SPREAD_PAIRS.length], [0], pairs]);
}

/** Bytes written over a program that no description tells of. */
export interface Patch {
  at: number;
  bytes: readonly number[];
}

/**
 * The image of the invented control unit: a program of pseudo-random bytes (the same each time), the items given, erased memory,
 * and the CRC-32 of the calibration in its last four bytes.
 */
export function writeImage(items: readonly Item[] = ITEMS, patches: readonly Patch[] = []): Buffer {
  const bytes = Buffer.alloc(IMAGE_BYTES, ERASED);
  const random = randomStream(20_261_201, 3);
  for (let at = 0; at < MEMORY.code.length; at++) bytes[at] = Math.floor(random.nextUniform() * 256);
  for (const patch of patches) Buffer.from(patch.bytes).copy(bytes, patch.at - MEMORY.base);
  const data = bytes.subarray(MEMORY.data.address - MEMORY.base);
  data.write(`${MEMORY.epk.text}\0`, MEMORY.epk.address - MEMORY.data.address, "latin1");
  writeSharedAxes(bytes);
  for (const item of items) writeItem(bytes, item);
  const end = MEMORY.checksumAt - MEMORY.data.address;
  data.writeUInt32LE(crc32(data.subarray(0, end)), end);
  return bytes;
}
