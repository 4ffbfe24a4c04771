import type { OverlayPlotProps } from "@/components/charts/overlay/curve-shapes";
import { OVERLAY_BOX } from "@/components/charts/overlay/overlay-layout";

/** Rows of brackets under the upper panel's top edge: A above B. */
const ROW: Record<"a" | "b", number> = { a: 0, b: 20 };
const LEAST_WIDTH = 10;

/** A bracket over each stretch with a spike or ripple, with side and kind in words, and a pale stretch down to the axis. */
export function OverlayMarks({ data, layout }: OverlayPlotProps) {
  const { x, right } = layout;
  const within = (rpm: number) => Math.min(right, Math.max(OVERLAY_BOX.left, x(rpm)));
  return (data.marks ?? []).map((mark) => {
    const centre = (within(mark.fromRpm) + within(mark.toRpm)) / 2;
    const half = Math.max(LEAST_WIDTH, within(mark.toRpm) - within(mark.fromRpm)) / 2;
    if (x(mark.toRpm) < OVERLAY_BOX.left || x(mark.fromRpm) > right) return null;
    const y = OVERLAY_BOX.curvesTop + 4 + ROW[mark.side];
    const atEnd = centre > right - 60;
    return (
      <g key={`${mark.side}${mark.fromRpm}`}>
        <rect
          x={centre - half}
          y={y}
          width={2 * half}
          height={OVERLAY_BOX.curvesBottom - y}
          fillOpacity="0.07"
          className="fill-ink"
        />
        <path
          d={`M${centre - half} ${y + 6}v-6h${2 * half}v6`}
          fill="none"
          strokeWidth="1.5"
          className="stroke-ink"
        />
        <text
          x={atEnd ? centre - half - 4 : centre + half + 4}
          y={y + 4}
          dy="0.35em"
          textAnchor={atEnd ? "end" : "start"}
          className="chart-label"
        >
          {mark.side.toUpperCase()} {mark.code}
        </text>
      </g>
    );
  });
}
