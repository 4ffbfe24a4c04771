import type { AxisDescription, ByteOrder, Characteristic } from "@/lib/calibration/a2l/types";
import type { Limits } from "@/lib/calibration/values/convert/converter";
import { decimalsOf } from "@/lib/calibration/values/convert/presentation";
import type { AxisNeed, PlacedRecord } from "@/lib/calibration/values/memory/place-record";
import { exactRaw, type Raw } from "@/lib/calibration/values/memory/read-number";
import { NotReadable } from "@/lib/calibration/values/not-readable";
import { type ReadingContext, readSeries } from "@/lib/calibration/values/reading-context";
import { cellsOfRescale, pointsOfCurve, pointsOfRescale } from "@/lib/calibration/values/rescale-axis";
import { sharedAxis } from "@/lib/calibration/values/shared-axis";
import type { PhysicalValue, ReadAxis, ReadCharacteristic } from "@/lib/calibration/values/types";

/** Reads another characteristic by name, for axes that rest on a curve. */
export type ReadByName = (name: string) => ReadCharacteristic;

/** What is known of an axis before its record is placed: how many points it has where another thing tells it. */
export function needOf(context: ReadingContext, axis: AxisDescription, letter: AxisNeed["letter"]): AxisNeed {
  const need = { letter, max: axis.maxPoints, used: null };
  switch (axis.kind) {
    case "COM_AXIS":
    case "RES_AXIS": {
      const shared = sharedOf(context, axis);
      if (axis.kind === "COM_AXIS") {
        if (shared.pairs)
          throw new NotReadable(`its axis ${shared.read.name} holds rescale pairs, not points`);
        return { ...need, used: shared.raw.length };
      }
      if (!shared.pairs) throw new NotReadable(`its axis ${shared.read.name} holds no rescale pairs`);
      return { ...need, used: cellsOfRescale(shared, axis.maxPoints) };
    }
    case "FIX_AXIS":
      return axis.fixedRaw ? { ...need, used: axis.fixedRaw.length } : need;
    default:
      return need;
  }
}

function sharedOf(context: ReadingContext, axis: AxisDescription) {
  if (axis.reference === null) throw new NotReadable("it names no shared axis");
  try {
    return sharedAxis(context, axis.reference);
  } catch (error) {
    if (!(error instanceof NotReadable)) throw error;
    throw new NotReadable(`its axis ${axis.reference} can't be read: ${error.message}`);
  }
}

/** Raw point of a cell that no input leads to. */
const NONE = "none";

/** Reads one axis of a placed record. Throws NotReadable. */
export function readAxis(
  context: ReadingContext,
  {
    axis,
    letter,
    count,
    placed,
  }: { axis: AxisDescription; letter: AxisNeed["letter"]; count: number; placed: PlacedRecord },
  owner: Characteristic,
  byName: ReadByName,
): ReadAxis {
  const { module, book } = context;
  const order = axis.byteOrder ?? owner.byteOrder ?? module.byteOrder;
  const converter = book.named(axis.conversion);
  const limits: Limits = { lower: axis.lowerLimit, upper: axis.upperLimit, extended: null };
  const series = placed.axes[letter];
  const measured = axis.inputQuantity === null ? undefined : module.measurements.get(axis.inputQuantity);
  const unit =
    axis.physUnit ?? (axis.conversion === null ? "" : converter.unit || (measured?.physUnit ?? ""));
  const result = (
    raw: readonly Raw[],
    points: PhysicalValue[] = raw.map((value) => converter.toPhysical(Number(value), limits)),
  ): ReadAxis => ({
    kind: axis.kind,
    reference: axis.reference,
    inputQuantity: axis.inputQuantity,
    unit,
    decimals: decimalsOf(axis.format, converter, series?.type ?? "UBYTE"),
    points,
    raw: raw.map(exactRaw),
  });
  switch (axis.kind) {
    case "STD_AXIS":
      if (!series) throw new NotReadable(`its layout has no points for axis ${letter.toLowerCase()}`);
      return result(readSeries(context, series, order));
    case "FIX_AXIS":
      return result(axis.fixedRaw ?? fixedFromMemory(context, placed, letter, count, order));
    case "COM_AXIS": {
      const shared = sharedOf(context, axis);
      if (shared.falls) context.fallingAxes.add(owner.name);
      const quantity =
        axis.inputQuantity ?? context.module.axisPoints.get(shared.read.name)?.inputQuantity ?? null;
      return { ...result(shared.raw), inputQuantity: quantity };
    }
    case "RES_AXIS": {
      const shared = sharedOf(context, axis);
      const raw = pointsOfRescale(shared, count);
      const points = raw.map((value) => (value === null ? null : converter.toPhysical(value, limits)));
      const quantity =
        axis.inputQuantity ?? context.module.axisPoints.get(shared.read.name)?.inputQuantity ?? null;
      return { ...result([], points), raw: raw.map((value) => value ?? NONE), inputQuantity: quantity };
    }
    case "CURVE_AXIS": {
      if (axis.reference === null) throw new NotReadable("it names no curve for its axis");
      const curve = byName(axis.reference);
      const [input] = curve.axes;
      if (curve.type !== "CURVE" || !input) throw new NotReadable(`its axis ${axis.reference} is no curve`);
      return {
        kind: axis.kind,
        reference: axis.reference,
        inputQuantity: input.inputQuantity ?? axis.inputQuantity,
        unit: input.unit,
        decimals: input.decimals,
        points: pointsOfCurve(curve.values, input.points, count),
        raw: pointsOfCurve(curve.values, input.raw, count).map((value) => value ?? NONE),
      };
    }
  }
}

/** A fixed axis whose parameters lie in memory: offset + i·distance, or offset + i·2^shift. */
function fixedFromMemory(
  context: ReadingContext,
  placed: PlacedRecord,
  letter: AxisNeed["letter"],
  count: number,
  order: ByteOrder,
): number[] {
  const number = (keyword: string): number | null => {
    const series = placed.parameters.get(`${keyword}_${letter}`);
    return series ? Number(readSeries(context, series, order)[0]) : null;
  };
  const offset = number("OFFSET");
  const shift = number("SHIFT_OP");
  const step = number("DIST_OP") ?? (shift === null ? null : 2 ** shift);
  if (offset === null || step === null || !Number.isFinite(step)) {
    throw new NotReadable(`nothing states the points of its fixed axis ${letter.toLowerCase()}`);
  }
  return Array.from({ length: count }, (_, k) => offset + k * step);
}
