import { Area, LinePath } from "@visx/shape";
import type { LinearScale } from "@/components/charts/frame/axes";
import type { FillIds } from "@/components/charts/frame/fills";
import type { Series } from "@/components/charts/frame/series";
import type { OverlayLayout } from "@/components/charts/overlay/overlay-layout";
import type { DeltaView, OverlayData, OverlayQuantity } from "@/components/charts/overlay/overlay-types";

export interface OverlayPlotProps {
  data: OverlayData;
  quantity: OverlayQuantity;
  delta: DeltaView;
  layout: OverlayLayout;
  everyRun: boolean;
  fills: FillIds;
  clipId: string;
}

interface CurveLineProps {
  indices: readonly number[];
  rpm: readonly number[];
  values: Series;
  x: LinearScale;
  y: LinearScale;
  className: string;
}

/** One curve; a gap in the values is a gap in the line. */
export function CurveLine({ indices, rpm, values, x, y, className }: CurveLineProps) {
  return (
    <LinePath<number>
      data={[...indices]}
      x={(i) => x(rpm[i] ?? 0)}
      y={(i) => y(values[i] ?? 0)}
      defined={(i) => values[i] !== null && values[i] !== undefined}
      fill="none"
      strokeLinejoin="round"
      className={className}
    />
  );
}

/** Closed band between two series; gaps stay open. */
export function BandArea({
  indices,
  rpm,
  low,
  high,
  x,
  y,
}: Omit<CurveLineProps, "values" | "className"> & { low: Series; high: Series }) {
  return (
    <Area<number>
      data={[...indices]}
      x={(i) => x(rpm[i] ?? 0)}
      y0={(i) => y(low[i] ?? 0)}
      y1={(i) => y(high[i] ?? 0)}
      defined={(i) => typeof low[i] === "number" && typeof high[i] === "number"}
      fillOpacity="0.13"
      className="fill-delta"
    />
  );
}
