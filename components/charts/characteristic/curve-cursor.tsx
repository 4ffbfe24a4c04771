"use client";

import { CURVE_BOX, type CurveLayout } from "@/components/charts/characteristic/curve-layout";
import type { JoinedCurves } from "@/components/charts/characteristic/join-curves";
import { type CursorStore, useCursorIndex } from "@/components/charts/frame/cursor-store";
import { type StripValue, ValueStrip } from "@/components/charts/frame/value-strip";
import { numberText } from "@/components/ui/data/number-text";

interface CurveCursorProps {
  store: CursorStore;
  joined: JoinedCurves;
}

/** Line through both panels with a marker on each curve. Draws nothing while the cursor rests. */
export function CurveCursor({ store, joined, layout }: CurveCursorProps & { layout: CurveLayout }) {
  const index = useCursorIndex(store);
  const x = index === null ? undefined : joined.x[index];
  if (index === null || x === undefined) return null;
  const at = layout.x(x);
  const [a, b, delta] = [joined.a[index], joined.b[index], joined.delta[index]];
  const bottom = joined.delta.some((value) => value !== null)
    ? CURVE_BOX.deltaBottom
    : CURVE_BOX.curvesBottom;
  return (
    <g>
      <line x1={at} x2={at} y1={CURVE_BOX.curvesTop - 8} y2={bottom} className="stroke-ink" />
      {typeof a === "number" && <circle cx={at} cy={layout.curves(a)} r="5" className="marker-a" />}
      {typeof b === "number" && (
        <rect x={at - 4.5} y={layout.curves(b) - 4.5} width="9" height="9" className="marker-b" />
      )}
      {typeof delta === "number" && (
        <path
          d={`M${at} ${layout.delta(delta) - 5.5}l5.5 5.5l-5.5 5.5l-5.5 -5.5z`}
          strokeWidth="2"
          className="fill-surface stroke-delta"
        />
      )}
    </g>
  );
}

export interface CurveStripProps extends CurveCursorProps {
  axisName: string;
  axisUnit: string;
  axisDecimals: number;
  unit: string;
  decimals: number;
  labelA: string;
  labelB: string;
}

/** Values under the cursor; at rest those at the largest difference, and the strip says so. */
export function CurveStrip({
  store,
  joined,
  axisName,
  axisUnit,
  axisDecimals,
  unit,
  decimals,
  ...labels
}: CurveStripProps) {
  const index = useCursorIndex(store);
  const at = index ?? largestDelta(joined);
  const side = (values: readonly (number | null)[]) => numberText(values[at], { decimals });
  const values: StripValue[] = [
    {
      term: axisName,
      value: numberText(joined.x[at], { decimals: axisDecimals }),
      unit: axisUnit,
      note: index === null ? "at the largest difference" : "under the cursor",
    },
    { term: `A ${labels.labelA}`, marker: "a", value: side(joined.a), unit },
    { term: `B ${labels.labelB}`, marker: "b", value: side(joined.b), unit },
    {
      term: "B \u2212 A",
      value: numberText(joined.delta[at], { decimals, signed: true }),
      unit,
      emphasis: true,
    },
  ];
  return <ValueStrip values={values} />;
}

/** Place of the largest difference; 0 where there is none. */
function largestDelta({ delta }: JoinedCurves): number {
  return delta.reduce<number>(
    (best, value, i) => (Math.abs(value ?? 0) > Math.abs(delta[best] ?? 0) ? i : best),
    0,
  );
}
