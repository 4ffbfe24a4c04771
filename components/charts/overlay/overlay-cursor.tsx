"use client";

import { type CursorStore, useCursorIndex } from "@/components/charts/frame/cursor-store";
import { type StripValue, ValueStrip } from "@/components/charts/frame/value-strip";
import { deltaText } from "@/components/charts/overlay/describe-overlay";
import { OVERLAY_BOX, type OverlayLayout } from "@/components/charts/overlay/overlay-layout";
import type { DeltaView, OverlayData, OverlayQuantity } from "@/components/charts/overlay/overlay-types";
import { CursorMarks } from "@/components/charts/pair/side-shapes";
import { counted, numberText } from "@/components/ui/data/number-text";

interface CursorProps {
  store: CursorStore;
  data: OverlayData;
  quantity: OverlayQuantity;
  delta: DeltaView;
}

/** Line through both panels with a marker on each curve. Draws nothing while the cursor rests. */
export function OverlayCursor({
  store,
  data,
  quantity,
  delta,
  layout,
}: CursorProps & { layout: OverlayLayout }) {
  const index = useCursorIndex(store);
  const rpm = index === null ? undefined : data.rpm[index];
  if (index === null || rpm === undefined) return null;
  return (
    <CursorMarks
      at={layout.x(rpm)}
      top={OVERLAY_BOX.curvesTop - 8}
      bottom={OVERLAY_BOX.deltaBottom}
      a={quantity.a[index]}
      b={quantity.b[index]}
      delta={delta.values[index]}
      scales={layout}
    />
  );
}

/** Values under the cursor; at rest those at `restIndex`, and the strip says so. */
export function OverlayStrip({
  store,
  data,
  quantity,
  delta,
  restIndex,
}: CursorProps & { restIndex: number }) {
  const index = useCursorIndex(store);
  const at = index ?? restIndex;
  const number = (value: number | null | undefined) => numberText(value, { decimals: quantity.decimals });
  const values: StripValue[] = [
    {
      term: "Engine speed",
      value: numberText(data.rpm[at]),
      unit: "1/min",
      note: index === null ? "at the largest difference" : "under the cursor",
    },
    {
      term: `A ${data.labelA}`,
      marker: "a",
      value: number(quantity.a[at]),
      unit: quantity.unit,
      note: counted(data.nA, "run"),
    },
    {
      term: `B ${data.labelB}`,
      marker: "b",
      value: number(quantity.b[at]),
      unit: quantity.unit,
      note: counted(data.nB, "run"),
    },
    { term: "B \u2212 A", value: deltaText(delta, at), note: verdictAt(data, at), emphasis: true },
  ];
  return <ValueStrip values={values} />;
}

function verdictAt(data: OverlayData, index: number): string {
  const rpm = data.rpm[index];
  const region = data.regions.find((r) => rpm !== undefined && rpm >= r.fromRpm && rpm <= r.toRpm);
  if (!region) return "no difference shown";
  return region.verdict === "gain" ? "B higher, outside the band" : "A higher, outside the band";
}
