import { scaleLinear } from "@visx/scale";
import type { LinearScale } from "@/components/charts/frame/axes";
import { extentOf, indexSpan, type Range, type Series } from "@/components/charts/frame/series";
import type { DeltaView, OverlayData, OverlayQuantity } from "@/components/charts/overlay/overlay-types";

/** Geometry in px; the lower panel is half as high as the upper one. Both share the gutters. */
export const OVERLAY_BOX = {
  left: 48,
  rightGutter: 84,
  curvesTop: 30,
  curvesBottom: 282,
  deltaTop: 330,
  deltaBottom: 456,
  height: 506,
} as const;

export interface OverlayLayout {
  width: number;
  right: number;
  x: LinearScale;
  curves: LinearScale;
  delta: LinearScale;
  /** First and last grid index in view. */
  first: number;
  last: number;
  /** The curves' axis does not start at zero because a part of it is in view. */
  zoomed: boolean;
}

/** Scales of both panels for a width and the range in view. Torque and power start at zero unless zoomed. */
export function overlayLayout(
  data: OverlayData,
  quantity: OverlayQuantity,
  delta: DeltaView,
  range: Range | null,
  width: number,
): OverlayLayout {
  const right = Math.max(OVERLAY_BOX.left + 120, width - OVERLAY_BOX.rightGutter);
  const all = { first: 0, last: Math.max(0, data.rpm.length - 1) };
  const span = (range && indexSpan(data.rpm, range)) ?? all;
  const from = data.rpm[span.first] ?? 0;
  const to = data.rpm[span.last] ?? 1;
  const zoomed = span.first !== all.first || span.last !== all.last;

  const curvesExtent = extentOf([quantity.a, quantity.b], span.first, span.last) ?? [0, 1];
  const room = (curvesExtent[1] - curvesExtent[0] || 1) * 0.06;
  const curvesDomain = zoomed
    ? [curvesExtent[0] - room, curvesExtent[1] + room]
    : [Math.min(0, curvesExtent[0]), curvesExtent[1] + room];

  return {
    width,
    right,
    x: scaleLinear<number>({ domain: [from, to], range: [OVERLAY_BOX.left, right] }),
    curves: scaleLinear<number>({
      domain: curvesDomain,
      range: [OVERLAY_BOX.curvesBottom, OVERLAY_BOX.curvesTop],
      nice: true,
    }),
    delta: scaleLinear<number>({
      domain: symmetricDomain(delta, span.first, span.last),
      range: [OVERLAY_BOX.deltaBottom, OVERLAY_BOX.deltaTop],
    }),
    ...span,
    zoomed,
  };
}

/**
 * Limits symmetric about zero that hold the difference and its band. Only a band that opens very wide at an end of the
 * range (beyond 2.5 times what three quarters of its points need) is let out of the panel, so that it does not flatten the rest.
 */
function symmetricDomain(delta: DeltaView, first: number, last: number): [number, number] {
  const sizes = (series: Series) =>
    series
      .slice(first, last + 1)
      .filter((value): value is number => value !== null && Number.isFinite(value))
      .map(Math.abs);
  const band = [...sizes(delta.low), ...sizes(delta.high)].sort((x, y) => x - y);
  const most = Math.max(0, ...sizes(delta.values));
  const usual = band[Math.floor(0.75 * (band.length - 1))] ?? 0;
  const limit = Math.max(most, Math.min(band.at(-1) ?? 0, 2.5 * Math.max(most, usual))) || 1;
  return [-limit * 1.05, limit * 1.05];
}
