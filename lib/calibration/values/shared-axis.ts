import { type AxisPoints, DATA_TYPES } from "@/lib/calibration/a2l/types";
import { decimalsOf, joinRanges, stepOf } from "@/lib/calibration/values/convert/presentation";
import { placeRecord } from "@/lib/calibration/values/memory/place-record";
import { exactRaw, isFloat } from "@/lib/calibration/values/memory/read-number";
import { NotReadable } from "@/lib/calibration/values/not-readable";
import { type ReadingContext, readSeries, type SharedAxis } from "@/lib/calibration/values/reading-context";

/** A shared axis (AXIS_PTS) by name, read once an image. Throws NotReadable, each time for the same reason. */
export function sharedAxis(context: ReadingContext, name: string): SharedAxis {
  let found = context.sharedAxes.get(name);
  if (!found) {
    found = readOrReason(context, name);
    context.sharedAxes.set(name, found);
  }
  if (found instanceof NotReadable) throw found;
  return found;
}

function readOrReason(context: ReadingContext, name: string): SharedAxis | NotReadable {
  const points = context.module.axisPoints.get(name);
  if (!points) return new NotReadable("the description does not hold it");
  try {
    return readAxisPoints(context, points);
  } catch (error) {
    if (error instanceof NotReadable) return error;
    throw error;
  }
}

function readAxisPoints(context: ReadingContext, points: AxisPoints): SharedAxis {
  const { module, memory, book } = context;
  const layout = module.layouts.get(points.layout);
  if (!layout) throw new NotReadable(`its layout ${points.layout} is not in the description`);
  const order = points.byteOrder ?? module.byteOrder;
  const isRescale = layout.components.some(({ keyword }) => keyword === "AXIS_RESCALE_X");
  const placed = placeRecord({
    layout,
    address: points.address,
    order,
    alignments: module.alignments,
    memory,
    axes: [{ letter: "X", max: points.maxPoints, used: isRescale ? 1 : null }],
    dims: null,
  });
  const series = isRescale ? placed.rescale : placed.axes.X;
  if (!series) throw new NotReadable(`its layout ${layout.name} has no axis points`);
  const raw = readSeries(context, series, order);
  const converter = book.named(points.conversion);
  const limits = { lower: points.lowerLimit, upper: points.upperLimit, extended: points.extendedLimits };
  const falls = series.stride < 0;
  const pairs = isRescale
    ? Array.from({ length: raw.length / 2 }, (_, k) => ({ value: raw[2 * k], index: Number(raw[2 * k + 1]) }))
    : null;
  return {
    raw,
    pairs,
    falls,
    fullScale: isFloat(series.type) ? Infinity : 2 ** (8 * DATA_TYPES[series.type]) - 1,
    read: {
      name: points.name,
      text: points.text,
      type: "AXIS_PTS",
      address: points.address,
      unit: points.physUnit ?? converter.unit,
      decimals: decimalsOf(points.format, converter, series.type),
      dims: pairs ? [2, pairs.length] : [raw.length],
      axes: [],
      values: raw.map((value, k) =>
        pairs && k % 2 === 1 ? Number(value) : converter.toPhysical(Number(value), limits),
      ),
      raw: raw.map(exactRaw),
      characters: null,
      limits,
      rawStep: stepOf(converter, raw, limits, series.type),
      functions: context.functionsOf.get(points.name) ?? [],
      groups: context.groupsOf.get(points.name) ?? [],
      readOnly: points.readOnly,
      formula: null,
      bytes: joinRanges(placed.bytes),
    },
  };
}
