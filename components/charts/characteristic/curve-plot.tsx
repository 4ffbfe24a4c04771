import { memo } from "react";
import { CURVE_BOX, type CurveLayout } from "@/components/charts/characteristic/curve-layout";
import type { JoinedCurves, PointCurve } from "@/components/charts/characteristic/join-curves";
import { BaseAxis, fittingTicks, ValueAxis } from "@/components/charts/frame/axes";
import { shiftLabels } from "@/components/charts/frame/label-shift";
import { CurveLine, EndLabel, SideMarker } from "@/components/charts/pair/side-shapes";

export interface CurvePlotProps {
  a: PointCurve | null;
  b: PointCurve | null;
  joined: JoinedCurves;
  layout: CurveLayout;
  /** Quantity and unit of the values, and of the axis. */
  title: string;
  axisTitle: string;
  unit: string;
  labelA: string;
  labelB: string;
}

/** Both curves with their own points, the difference below: everything that stays still while the cursor moves. */
export const CurvePlot = memo(function CurvePlot(props: CurvePlotProps) {
  const { a, b, joined, layout, title, axisTitle, unit } = props;
  const { x, curves, right } = layout;
  const { left, curvesTop, curvesBottom, deltaBottom } = CURVE_BOX;
  return (
    <>
      <text x={left} y={14} className="chart-title">
        {title}
      </text>
      <ValueAxis
        scale={curves}
        left={left}
        right={right}
        ticks={fittingTicks(curves, curvesBottom - curvesTop, 48)}
      />
      {b && <CurveLine indices={places(b.x)} xs={b.x} values={b.y} x={x} y={curves} className="series-b" />}
      {a && (
        <CurveLine
          indices={places(a.x)}
          xs={a.x}
          values={a.y}
          x={x}
          y={curves}
          className="series-a overprint"
        />
      )}
      {b && <Points curve={b} layout={layout} side="b" />}
      {a && <Points curve={a} layout={layout} side="a" />}
      <EndLabels {...props} />
      {a && b && <Delta joined={joined} layout={layout} unit={unit} />}
      <BaseAxis
        scale={x}
        top={a && b ? deltaBottom : curvesBottom}
        ticks={fittingTicks(x, right - left, 96)}
        title={axisTitle}
        right={right}
      />
    </>
  );
});

const places = (xs: readonly number[]) => xs.map((_, i) => i);

/** A marker at each point of a side that has a value. */
function Points({ curve, layout, side }: { curve: PointCurve; layout: CurveLayout; side: "a" | "b" }) {
  return curve.x.map((at, i) => {
    const value = curve.y[i];
    if (typeof value !== "number") return null;
    const key = `${side}${i}`;
    return <SideMarker key={key} side={side} cx={layout.x(at)} cy={layout.curves(value)} />;
  });
}

function EndLabels({ a, b, layout, labelA, labelB }: CurvePlotProps) {
  const sides = [
    { curve: a, text: `A ${labelA}` },
    { curve: b, text: `B ${labelB}` },
  ].flatMap(({ curve, text }) => {
    const end = curve?.y.findLast((value) => typeof value === "number");
    return typeof end === "number" ? [{ y: layout.curves(end), text }] : [];
  });
  const shifted = shiftLabels(
    sides.map((side) => side.y),
    19,
    CURVE_BOX.curvesTop,
    CURVE_BOX.curvesBottom - 8,
  );
  return sides.map(({ y, text }, i) => (
    <EndLabel key={text} x={layout.right} y={shifted[i] ?? y} from={y} text={text} />
  ));
}

/** B − A, the zero line darkest. */
function Delta({ joined, layout, unit }: { joined: JoinedCurves; layout: CurveLayout; unit: string }) {
  const { left, deltaTop, deltaBottom } = CURVE_BOX;
  const { delta, x, right } = layout;
  return (
    <>
      <text x={left} y={deltaTop - 14} className="chart-title">
        {`B \u2212 A${unit ? `, ${unit}` : ""}`}
      </text>
      <ValueAxis
        scale={delta}
        left={left}
        right={right}
        ticks={fittingTicks(delta, deltaBottom - deltaTop, 30)}
        signed
        withoutLineAt={0}
      />
      <line x1={left} x2={right} y1={delta(0)} y2={delta(0)} strokeWidth="1.5" className="stroke-ink" />
      <CurveLine
        indices={places(joined.x)}
        xs={joined.x}
        values={joined.delta}
        x={x}
        y={delta}
        className="series-delta"
      />
    </>
  );
}
