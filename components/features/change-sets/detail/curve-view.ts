import type { PointCurve } from "@/components/charts/characteristic/join-curves";
import type { ChangeSide } from "@/lib/calibration/changes/types";
import type { PhysicalValue } from "@/lib/calibration/values/types";

type Numbers = (number | null)[];

const areNumbers = (values: readonly PhysicalValue[]): values is Numbers =>
  values.every((value) => typeof value !== "string");

/** Rising, falling or neither; equal neighbours are both. */
function direction(points: readonly number[]): "rising" | "falling" | null {
  const steps = points.slice(1).map((point, i) => point - (points[i] ?? 0));
  if (steps.every((step) => step >= 0)) return "rising";
  return steps.every((step) => step <= 0) ? "falling" : null;
}

/** A side over its own axis points, turned so that they rise; null where the axis is no such axis or values are texts. */
function overAxis({ axes, values }: ChangeSide): PointCurve | null {
  const points = axes[0]?.points ?? [];
  if (points.length === 0 || points.length !== values.length || !areNumbers(values)) return null;
  if (!points.every((point): point is number => typeof point === "number" && Number.isFinite(point)))
    return null;
  const runs = direction(points);
  if (runs === null) return null;
  return runs === "rising" ? { x: points, y: values } : { x: points.toReversed(), y: values.toReversed() };
}

export interface CurveView {
  a: PointCurve | null;
  b: PointCurve | null;
  /** The axis points do not rise or fall: the curves are drawn over the places 0, 1, 2 … */
  byPlace: boolean;
}

/** Both sides of a changed curve as they are drawn; null where values are texts, which no line can show. */
export function curveView(before: ChangeSide | null, after: ChangeSide | null): CurveView | null {
  const sides = [before, after];
  if (sides.some((side) => side && !areNumbers(side.values))) return null;
  const [a, b] = sides.map((side) => side && overAxis(side));
  if ((before === null || a) && (after === null || b)) return { a: a ?? null, b: b ?? null, byPlace: false };
  const overPlaces = (side: ChangeSide | null): PointCurve | null =>
    side && areNumbers(side.values) ? { x: side.values.map((_, i) => i), y: side.values } : null;
  return { a: overPlaces(before), b: overPlaces(after), byPlace: true };
}
