import { memo } from "react";
import { BaseAxis, fittingTicks, type LinearScale, ValueAxis } from "@/components/charts/frame/axes";
import { FillDefs } from "@/components/charts/frame/fills";
import { shiftLabels } from "@/components/charts/frame/label-shift";
import type { Series } from "@/components/charts/frame/series";
import { CurveLine, type OverlayPlotProps } from "@/components/charts/overlay/curve-shapes";
import { OverlayDelta } from "@/components/charts/overlay/overlay-delta";
import { OVERLAY_BOX } from "@/components/charts/overlay/overlay-layout";
import { OverlayMarks } from "@/components/charts/overlay/overlay-marks";

/** Everything that stays still while the cursor moves. */
export const OverlayPlot = memo(function OverlayPlot(props: OverlayPlotProps) {
  const { data, quantity, layout, everyRun, fills, clipId } = props;
  const { x, curves, right, first, last } = layout;
  const ends = [lastValue(quantity.a, last), lastValue(quantity.b, last)];
  const [labelYA, labelYB] = shiftLabels(
    ends.map((value) => (value === null ? OVERLAY_BOX.curvesTop : curves(value))),
    19,
    OVERLAY_BOX.curvesTop,
    OVERLAY_BOX.curvesBottom - 8,
  );
  const indices = Array.from({ length: last - first + 1 }, (_, i) => first + i);
  const line = (values: Series, className: string, key?: string) => (
    <CurveLine
      key={key}
      indices={indices}
      rpm={data.rpm}
      values={values}
      x={x}
      y={curves}
      className={className}
    />
  );

  return (
    <>
      <FillDefs ids={fills} />
      <clipPath id={clipId}>
        <rect
          x={OVERLAY_BOX.left}
          y={OVERLAY_BOX.curvesTop - 8}
          width={right - OVERLAY_BOX.left}
          height={OVERLAY_BOX.curvesBottom - OVERLAY_BOX.curvesTop + 8}
        />
      </clipPath>
      <text x={OVERLAY_BOX.left} y={14} className="chart-title">
        {quantity.label}, {quantity.unit}
      </text>
      <ValueAxis
        scale={curves}
        left={OVERLAY_BOX.left}
        right={right}
        ticks={fittingTicks(curves, OVERLAY_BOX.curvesBottom - OVERLAY_BOX.curvesTop, 56)}
      />
      <g clipPath={`url(#${clipId})`}>
        {everyRun && (
          <g strokeOpacity="0.35">
            {quantity.runsA?.map((run, i) => line(run, "run-a", `a${i}`))}
            {quantity.runsB?.map((run, i) => line(run, "run-b", `b${i}`))}
          </g>
        )}
        {line(quantity.b, "series-b")}
        {line(quantity.a, "series-a overprint")}
        <Markers {...props} />
      </g>
      <OverlayMarks {...props} />
      <EndLabel side="a" x={right} y={labelYA} end={ends[0]} scale={curves} text={`A ${data.labelA}`} />
      <EndLabel side="b" x={right} y={labelYB} end={ends[1]} scale={curves} text={`B ${data.labelB}`} />
      <OverlayDelta {...props} />
      <BaseAxis
        scale={x}
        top={OVERLAY_BOX.deltaBottom}
        ticks={fittingTicks(x, right - OVERLAY_BOX.left, 96)}
        title="engine speed, 1/min"
        right={right}
      />
    </>
  );
});

/** Round for A, square for B, at different engine speeds, so that the curves are told apart in grey and in glare. */
function Markers({ data, quantity, layout }: OverlayPlotProps) {
  const { x, curves, first, last, right } = layout;
  const ticks = fittingTicks(x, right - OVERLAY_BOX.left, 96);
  const step = (ticks[1] ?? 0) - (ticks[0] ?? 0);
  const at = (rpm: number) => data.rpm.findIndex((value, i) => i >= first && i <= last && value >= rpm);
  const spots = ticks.flatMap((tick) => [
    { side: "a" as const, index: at(tick), values: quantity.a },
    { side: "b" as const, index: at(tick + step / 2), values: quantity.b },
  ]);
  const seen = new Set<string>();
  return spots.map(({ side, index, values }) => {
    // Ticks finer than the grid would put several markers on one point.
    const key = `${side}${index}`;
    if (seen.has(key)) return null;
    seen.add(key);
    const value = values[index];
    const rpm = data.rpm[index];
    if (value === null || value === undefined || rpm === undefined) return null;
    const [cx, cy] = [x(rpm), curves(value)];
    return side === "a" ? (
      <circle key={key} cx={cx} cy={cy} r="3.5" className="marker-a" />
    ) : (
      <rect key={key} x={cx - 3.2} y={cy - 3.2} width="6.4" height="6.4" className="marker-b" />
    );
  });
}

interface EndLabelProps {
  side: "a" | "b";
  x: number;
  y: number | undefined;
  end: number | null | undefined;
  scale: LinearScale;
  text: string;
}

/** The name of a curve at its right end, with a hairline to it when the label had to move. */
function EndLabel({ x, y = 0, end, scale, text }: EndLabelProps) {
  const from = end === null || end === undefined ? y : scale(end);
  return (
    <>
      <path d={`M${x + 1} ${from}L${x + 9} ${y}`} fill="none" className="stroke-edge" />
      <text x={x + 12} y={y} dy="0.35em" className="chart-label">
        {text}
      </text>
    </>
  );
}

function lastValue(values: Series, last: number): number | null {
  for (let i = last; i >= 0; i -= 1) {
    const value = values[i];
    if (value !== null && value !== undefined) return value;
  }
  return null;
}
