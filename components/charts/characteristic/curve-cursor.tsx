"use client";

import { CURVE_BOX, type CurveLayout } from "@/components/charts/characteristic/curve-layout";
import type { JoinedCurves } from "@/components/charts/characteristic/join-curves";
import { type CursorStore, useCursorIndex } from "@/components/charts/frame/cursor-store";
import { type StripValue, ValueStrip } from "@/components/charts/frame/value-strip";
import { CursorMarks } from "@/components/charts/pair/side-shapes";
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
  return (
    <CursorMarks
      at={layout.x(x)}
      top={CURVE_BOX.curvesTop - 8}
      bottom={hasDelta(joined) ? CURVE_BOX.deltaBottom : CURVE_BOX.curvesBottom}
      a={joined.a[index]}
      b={joined.b[index]}
      delta={joined.delta[index]}
      scales={layout}
    />
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

/** Values under the cursor; at rest those at the largest difference, or at the first point where there is none, and the strip says so. */
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
      note:
        index !== null
          ? "under the cursor"
          : hasDelta(joined)
            ? "at the largest difference"
            : "at the first point",
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

const hasDelta = ({ delta }: JoinedCurves) => delta.some((value) => value !== null);

/** Place of the largest difference; 0 where there is none. */
function largestDelta({ delta }: JoinedCurves): number {
  return delta.reduce<number>(
    (best, value, i) => (Math.abs(value ?? 0) > Math.abs(delta[best] ?? 0) ? i : best),
    0,
  );
}
