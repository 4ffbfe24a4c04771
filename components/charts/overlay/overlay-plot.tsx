import { memo } from "react";
import { BaseAxis, fittingTicks, ValueAxis } from "@/components/charts/frame/axes";
import { FillDefs } from "@/components/charts/frame/fills";
import { shiftLabels } from "@/components/charts/frame/label-shift";
import type { Series } from "@/components/charts/frame/series";
import type { OverlayPlotProps } from "@/components/charts/overlay/curve-shapes";
import { OverlayDelta } from "@/components/charts/overlay/overlay-delta";
import { OVERLAY_BOX } from "@/components/charts/overlay/overlay-layout";
import { OverlayMarks } from "@/components/charts/overlay/overlay-marks";
import { CurveLine, EndLabel, SideMarker } from "@/components/charts/pair/side-shapes";

/** Everything that stays still while the cursor moves. */
export const OverlayPlot = memo(function OverlayPlot(props: OverlayPlotProps) {
  const { data, quantity, layout, everyRun, fills, clipId } = props;
  const { x, curves, right, first, last } = layout;
  const ends = [lastValue(quantity.a, last), lastValue(quantity.b, last)].map((value) =>
    value === null ? null : curves(value),
  );
  const labels = shiftLabels(
    ends.map((end) => end ?? OVERLAY_BOX.curvesTop),
    19,
    OVERLAY_BOX.curvesTop,
    OVERLAY_BOX.curvesBottom - 8,
  );
  const indices = Array.from({ length: last - first + 1 }, (_, i) => first + i);
  const line = (values: Series, className: string, key?: string) => (
    <CurveLine
      key={key}
      indices={indices}
      xs={data.rpm}
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
      {[`A ${data.labelA}`, `B ${data.labelB}`].map((text, i) => (
        <EndLabel key={text} x={right} y={labels[i] ?? 0} from={ends[i] ?? labels[i] ?? 0} text={text} />
      ))}
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

/** A marker of each side at different engine speeds. */
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
    return <SideMarker key={key} side={side} cx={x(rpm)} cy={curves(value)} />;
  });
}

function lastValue(values: Series, last: number): number | null {
  for (let i = last; i >= 0; i -= 1) {
    const value = values[i];
    if (value !== null && value !== undefined) return value;
  }
  return null;
}
