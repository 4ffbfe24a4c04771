import { Area } from "@visx/shape";
import type { FillIds } from "@/components/charts/frame/fills";
import type { Series } from "@/components/charts/frame/series";
import type { OverlayLayout } from "@/components/charts/overlay/overlay-layout";
import type { DeltaView, OverlayData, OverlayQuantity } from "@/components/charts/overlay/overlay-types";
import type { CurveLineProps } from "@/components/charts/pair/side-shapes";

export interface OverlayPlotProps {
  data: OverlayData;
  quantity: OverlayQuantity;
  delta: DeltaView;
  layout: OverlayLayout;
  everyRun: boolean;
  fills: FillIds;
  clipId: string;
}

/** Closed band between two series; gaps stay open. */
export function BandArea({
  indices,
  xs,
  low,
  high,
  x,
  y,
}: Omit<CurveLineProps, "values" | "className"> & { low: Series; high: Series }) {
  return (
    <Area<number>
      data={[...indices]}
      x={(i) => x(xs[i] ?? 0)}
      y0={(i) => y(low[i] ?? 0)}
      y1={(i) => y(high[i] ?? 0)}
      defined={(i) => typeof low[i] === "number" && typeof high[i] === "number"}
      fillOpacity="0.13"
      className="fill-delta"
    />
  );
}
