import {
  AXES_OF,
  AXIS_LETTERS,
  type Characteristic,
  DATA_TYPES,
  type DataType,
} from "@/lib/calibration/a2l/types";
import { decimalsOf, joinRanges, stepOf } from "@/lib/calibration/values/convert/presentation";
import type { CellPlaces } from "@/lib/calibration/values/memory/cell-places";
import { type PlacedRecord, placeRecord } from "@/lib/calibration/values/memory/place-record";
import { readCells } from "@/lib/calibration/values/memory/read-cells";
import { readCharacters } from "@/lib/calibration/values/memory/read-characters";
import { applyMask, exactRaw, type Raw } from "@/lib/calibration/values/memory/read-number";
import { NotReadable } from "@/lib/calibration/values/not-readable";
import { needOf, readAxis } from "@/lib/calibration/values/read-axis";
import type { ReadingContext } from "@/lib/calibration/values/reading-context";
import type { ReadCharacteristic } from "@/lib/calibration/values/types";

/** Curves that rest on curves that rest on curves … */
const LONGEST_CHAIN = 8;

/** Reads one characteristic from the image. Throws NotReadable with the reason for `notRead`. */
export function readCharacteristic(
  context: ReadingContext,
  wanted: Characteristic,
  chain: readonly string[] = [],
): ReadCharacteristic {
  const { module, book, memory } = context;
  refuseVirtual(wanted);
  const needed = AXES_OF[wanted.type];
  if (wanted.axes.length !== needed) {
    throw new NotReadable(
      `it is a ${wanted.type} with ${wanted.axes.length} axis descriptions, ${needed} ${needed === 1 ? "is" : "are"} needed`,
    );
  }
  const layout = module.layouts.get(wanted.layout);
  if (!layout) throw new NotReadable(`its layout ${wanted.layout} is not in the description`);
  const order = wanted.byteOrder ?? module.byteOrder;
  const needs = wanted.axes.map((axis, k) => needOf(context, axis, AXIS_LETTERS[k]));
  const dims = needs.length > 0 ? null : blockDims(wanted);
  const placed = placeRecord({
    layout,
    address: wanted.address,
    order,
    alignments: module.alignments,
    memory,
    axes: needs,
    dims,
  });
  const { cells } = placed;
  if (!cells) throw new NotReadable(`its layout ${layout.name} has no function values`);
  const converter = book.named(wanted.conversion);
  const limits = { lower: wanted.lowerLimit, upper: wanted.upperLimit, extended: wanted.extendedLimits };
  const common = {
    name: wanted.name,
    text: wanted.text,
    type: wanted.type,
    address: wanted.address,
    unit: wanted.physUnit ?? converter.unit,
    decimals: decimalsOf(wanted.format, converter, cells.type),
    limits,
    functions: context.functionsOf.get(wanted.name) ?? [],
    groups: context.groupsOf.get(wanted.name) ?? [],
    readOnly: wanted.readOnly,
    formula: wanted.derived?.formula ?? null,
  };
  if (wanted.type === "ASCII") {
    const { characters, bytes } = readCharacters(context, cells, order);
    return {
      ...common,
      dims: cells.dims,
      axes: [],
      values: [],
      raw: [],
      characters,
      rawStep: null,
      bytes: [bytes],
    };
  }
  const mask = applyMask(cells.type, wanted.bitMask);
  const byName = (name: string) => readForAxis(context, name, [...chain, wanted.name]);
  const axes = wanted.axes.map((axis, k) =>
    readAxis(context, { axis, letter: AXIS_LETTERS[k], count: placed.counts[k], placed }, wanted, byName),
  );
  noteFalling(context, wanted, placed, cells);
  const words = readCells(context, cells, order);
  const raw = words.map(mask);
  return {
    ...common,
    dims: cells.dims,
    axes,
    values: raw.map((value) => converter.toPhysical(Number(value), limits)),
    raw: raw.map(exactRaw),
    characters: null,
    rawStep: stepOf(converter, raw, limits, cells.type),
    ...(cells.dims.length === 0 && maskedBits(cells.type, wanted.bitMask, words[0])),
    bytes: joinRanges(placed.bytes),
  };
}

/** The word that a masked value is part of; nothing where the mask takes all of it. */
function maskedBits(type: DataType, mask: bigint | null, word: Raw): Pick<ReadCharacteristic, "bits"> {
  const width = 8 * DATA_TYPES[type];
  const own = mask === null ? -1n : BigInt.asUintN(width, mask);
  if (own === BigInt.asUintN(width, -1n) || own === -1n) return {};
  const hex = (bits: bigint) => `0x${bits.toString(16)}`;
  return { bits: { mask: hex(own), word: hex(BigInt.asUintN(width, BigInt(word))) } };
}

function refuseVirtual({ derived }: Characteristic): void {
  if (derived?.kind !== "virtual") return;
  const from = derived.inputs.length > 0 ? ` from ${derived.inputs.join(", ")}` : "";
  throw new NotReadable(
    `it has no memory of its own: its value comes by the formula ${derived.formula}${from}`,
  );
}

/** Cells of a block by its dimensions, without ones at the end; [] for one value. */
function blockDims({ type, matrixDim }: Characteristic): number[] {
  if (type === "VALUE") return [];
  if (matrixDim === null || matrixDim.length === 0) {
    throw new NotReadable(`its type is ${type} and it states no number of cells`);
  }
  const dims = [...matrixDim];
  while (dims.length > 1 && dims[dims.length - 1] === 1) dims.pop();
  for (const n of dims) {
    if (!Number.isInteger(n) || n < 1) throw new NotReadable(`it states ${n} cells, at least 1 is needed`);
  }
  return dims;
}

function readForAxis(context: ReadingContext, name: string, chain: readonly string[]): ReadCharacteristic {
  const curve = context.module.characteristics.get(name);
  if (!curve) throw new NotReadable(`its axis ${name} is not in the description`);
  if (chain.includes(name)) throw new NotReadable(`its axis ${name} rests on itself`);
  if (chain.length >= LONGEST_CHAIN)
    throw new NotReadable(`its axis rests on a chain of more than ${LONGEST_CHAIN} curves`);
  try {
    return readCharacteristic(context, curve, chain);
  } catch (error) {
    if (!(error instanceof NotReadable)) throw error;
    throw new NotReadable(`its axis ${name} can't be read: ${error.message}`);
  }
}

/** Remembers that values keep the order of addresses though an own axis is stored from its last point on. */
function noteFalling(
  context: ReadingContext,
  { name }: Characteristic,
  placed: PlacedRecord,
  cells: CellPlaces,
): void {
  const falls = Object.values(placed.axes).some((series) => series.stride < 0);
  if (falls && cells.dims.length > 1) context.fallingAxes.add(name);
}
