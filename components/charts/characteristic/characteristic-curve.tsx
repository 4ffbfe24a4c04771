"use client";

import { type ReactNode, useCallback, useId, useMemo, useState } from "react";
import { CurveCursor, CurveStrip } from "@/components/charts/characteristic/curve-cursor";
import { CURVE_BOX, curveLayout } from "@/components/charts/characteristic/curve-layout";
import { CurvePlot } from "@/components/charts/characteristic/curve-plot";
import { joinCurves, type PointCurve } from "@/components/charts/characteristic/join-curves";
import { ChartFigure } from "@/components/charts/frame/chart-figure";
import { CursorPad } from "@/components/charts/frame/cursor-pad";
import { createCursorStore } from "@/components/charts/frame/cursor-store";
import { useChartWidth } from "@/components/charts/frame/use-chart-width";
import { numberText } from "@/components/ui/data/number-text";

export interface CharacteristicCurveProps {
  title: string;
  unit: string;
  decimals: number;
  axis: { name: string; unit: string; decimals: number };
  /** x ascending; null: only the other side knows it. */
  a: PointCurve | null;
  b: PointCurve | null;
  labelA: string;
  labelB: string;
  /** What is to be seen, in words. */
  summary: string;
  notes?: readonly string[];
  /** The values behind the drawing. */
  table: ReactNode;
}

const titled = (name: string, unit: string) => (unit ? `${name}, ${unit}` : name);

/** A curve of the calibration on side A and side B, each with its own points, and B − A on the same axis below. */
export function CharacteristicCurve(props: CharacteristicCurveProps) {
  const { title, unit, decimals, axis, a, b, labelA, labelB, summary, notes, table } = props;
  const base = useId();
  const { ref, width } = useChartWidth();
  const [store] = useState(createCursorStore);
  const joined = useMemo(() => joinCurves(a, b), [a, b]);
  const layout = useMemo(() => curveLayout(joined, width), [joined, width]);
  const position = useCallback(
    (index: number) => `${numberText(joined.x[index], { decimals: axis.decimals })} ${axis.unit}`,
    [joined, axis.decimals, axis.unit],
  );
  const speak = useCallback(
    (index: number) => {
      const at = (values: readonly (number | null)[]) => numberText(values[index], { decimals });
      const difference = numberText(joined.delta[index], { decimals, signed: true });
      const spoken = difference.replace("+", "plus ").replace("\u2212", "minus ");
      return `${position(index)}, A ${at(joined.a)}, B ${at(joined.b)} ${unit}, difference ${spoken}`;
    },
    [joined, decimals, unit, position],
  );
  const height =
    a && b ? CURVE_BOX.height : CURVE_BOX.curvesBottom + CURVE_BOX.height - CURVE_BOX.deltaBottom;
  return (
    <ChartFigure
      title={title}
      summaryId={`${base}summary`}
      summary={summary}
      notes={notes}
      strip={
        <CurveStrip
          store={store}
          joined={joined}
          axisName={axis.name}
          axisUnit={axis.unit}
          axisDecimals={axis.decimals}
          {...{ unit, decimals, labelA, labelB }}
        />
      }
      table={table}
    >
      <div ref={ref} className="relative">
        <svg
          role="img"
          aria-label={`${title} over ${axis.name}. ${summary}`}
          viewBox={`0 0 ${width} ${height}`}
          height={height}
          className="isolate block w-full"
        >
          <CurvePlot
            title={titled(title, unit)}
            axisTitle={titled(axis.name, axis.unit)}
            {...{ a, b, joined, layout, unit, labelA, labelB }}
          />
        </svg>
        <svg
          aria-hidden="true"
          viewBox={`0 0 ${width} ${height}`}
          className="pointer-events-none absolute inset-0 size-full"
        >
          <CurveCursor store={store} joined={joined} layout={layout} />
        </svg>
        <CursorPad
          store={store}
          xs={joined.x}
          first={0}
          last={Math.max(0, joined.x.length - 1)}
          left={CURVE_BOX.left}
          right={layout.right}
          height={CURVE_BOX.deltaBottom}
          axisName={axis.name}
          summaryId={`${base}summary`}
          speak={speak}
          position={position}
        />
      </div>
    </ChartFigure>
  );
}
