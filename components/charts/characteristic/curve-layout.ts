import { scaleLinear } from "@visx/scale";
import type { JoinedCurves } from "@/components/charts/characteristic/join-curves";
import type { LinearScale } from "@/components/charts/frame/axes";
import { extentOf } from "@/components/charts/frame/series";

/** Geometry in px; the lower panel is nearly half as high as the upper one, both share the gutters. */
export const CURVE_BOX = {
  left: 60,
  rightGutter: 84,
  curvesTop: 30,
  curvesBottom: 230,
  deltaTop: 278,
  deltaBottom: 370,
  height: 420,
} as const;

export interface CurveLayout {
  width: number;
  right: number;
  x: LinearScale;
  curves: LinearScale;
  /** Symmetric about zero. */
  delta: LinearScale;
}

/** Scales of both panels. The curves' axis holds the values, not zero: a small change of a large value is to be seen. */
export function curveLayout(joined: JoinedCurves, width: number): CurveLayout {
  const right = Math.max(CURVE_BOX.left + 120, width - CURVE_BOX.rightGutter);
  const last = joined.x.length - 1;
  const [low, high] = extentOf([joined.a, joined.b], 0, last) ?? [0, 1];
  const room = (high - low || Math.abs(high) || 1) * 0.06;
  const most = Math.max(...joined.delta.map((value) => Math.abs(value ?? 0)), 0) || 1;
  const [from, to] = [joined.x[0] ?? 0, joined.x[last] ?? 1];
  return {
    width,
    right,
    x: scaleLinear<number>({
      domain: from === to ? [from - 1, to + 1] : [from, to],
      range: [CURVE_BOX.left, right],
    }),
    curves: scaleLinear<number>({
      domain: [low - room, high + room],
      range: [CURVE_BOX.curvesBottom, CURVE_BOX.curvesTop],
      nice: true,
    }),
    delta: scaleLinear<number>({
      domain: [-1.05 * most, 1.05 * most],
      range: [CURVE_BOX.deltaBottom, CURVE_BOX.deltaTop],
    }),
  };
}
