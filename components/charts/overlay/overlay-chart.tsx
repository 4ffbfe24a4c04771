"use client";

import { type ReactNode, useCallback, useId, useMemo, useState } from "react";
import { ChartFigure } from "@/components/charts/frame/chart-figure";
import { CursorPad } from "@/components/charts/frame/cursor-pad";
import { createCursorStore } from "@/components/charts/frame/cursor-store";
import { fillIds } from "@/components/charts/frame/fills";
import { RangeForm } from "@/components/charts/frame/range-form";
import { useChartWidth } from "@/components/charts/frame/use-chart-width";
import { describeOverlay, speakPoint } from "@/components/charts/overlay/describe-overlay";
import { OverlayCursor, OverlayStrip } from "@/components/charts/overlay/overlay-cursor";
import { OVERLAY_BOX, overlayLayout } from "@/components/charts/overlay/overlay-layout";
import { OverlayPlot } from "@/components/charts/overlay/overlay-plot";
import { OverlayTable } from "@/components/charts/overlay/overlay-table";
import {
  deltaView,
  mostTellingIndex,
  type OverlayData,
  type OverlayView,
} from "@/components/charts/overlay/overlay-types";
import { Button } from "@/components/ui/action/button";
import { SegmentedControl } from "@/components/ui/action/segmented-control";
import { numberText } from "@/components/ui/data/number-text";

export interface OverlayChartProps {
  data: OverlayData;
  title: ReactNode;
  /** Smoothing, correction, alignment, and what was left out: one sentence each. */
  notes?: readonly string[];
  /** The view a link asked for. */
  initialView?: Partial<OverlayView>;
  /** Told of every change of view, so that a page can put it into its link. */
  onViewChange?: (view: OverlayView) => void;
  /** Without controls and cursor: for a record or a print. */
  still?: boolean;
}

/**
 * Side A and side B over engine speed, B − A with its band below on the same axis, one cursor through both.
 * The server draws it whole at 760 px; in the browser it takes the width it is given.
 */
export function OverlayChart({
  data,
  title,
  notes,
  initialView,
  onViewChange,
  still = false,
}: OverlayChartProps) {
  const base = useId();
  const { ref, width } = useChartWidth();
  const [store] = useState(createCursorStore);
  const [view, setView] = useState<OverlayView>({
    quantityId: data.quantities[0]?.id ?? "",
    mode: "percent",
    range: null,
    everyRun: false,
    ...initialView,
  });

  const change = (part: Partial<OverlayView>) => {
    if ("range" in part) store.set(null);
    const next = { ...view, ...part };
    setView(next);
    onViewChange?.(next);
  };

  const quantity = data.quantities.find((q) => q.id === view.quantityId) ?? data.quantities[0];
  const delta = useMemo(() => quantity && deltaView(data, quantity, view.mode), [data, quantity, view.mode]);
  const layout = useMemo(
    () => quantity && delta && overlayLayout(data, quantity, delta, view.range, width),
    [data, quantity, delta, view.range, width],
  );
  const speak = useCallback(
    (index: number) => (quantity && delta ? speakPoint(data, quantity, delta, index) : ""),
    [data, quantity, delta],
  );
  if (!quantity || !delta || !layout) return null;

  const summaryId = `${base}summary`;
  const summary = describeOverlay(data, delta);
  const parts = { data, quantity, delta };
  const whole = { from: data.rpm[0] ?? 0, to: data.rpm.at(-1) ?? 0 };
  const stepQuantity = (by: number) => {
    const at = data.quantities.indexOf(quantity);
    const next = data.quantities[(at + by + data.quantities.length) % data.quantities.length];
    if (next) change({ quantityId: next.id });
  };
  const shortcuts: Record<string, () => void> = {
    "[": () => stepQuantity(-1),
    "]": () => stepQuantity(1),
    "0": () => change({ range: null }),
  };
  const hasRuns = Boolean(quantity.runsA?.length || quantity.runsB?.length);

  return (
    <ChartFigure
      title={title}
      summaryId={summaryId}
      summary={summary}
      notes={notes}
      onShortcut={(key) => {
        shortcuts[key]?.();
        return key in shortcuts;
      }}
      controls={
        !still && (
          <>
            {data.quantities.length > 1 && (
              <SegmentedControl
                legend="Quantity"
                options={data.quantities.map((q) => ({ value: q.id, label: q.unit }))}
                value={quantity.id}
                onChange={(quantityId) => change({ quantityId })}
              />
            )}
            <SegmentedControl
              legend="Difference in"
              options={[
                { value: "percent", label: "Δ %" },
                { value: "absolute", label: `Δ ${quantity.unit}` },
              ]}
              value={view.mode}
              onChange={(mode) => change({ mode })}
            />
            {hasRuns && (
              <Button aria-pressed={view.everyRun} onClick={() => change({ everyRun: !view.everyRun })}>
                Every run
              </Button>
            )}
            <RangeForm whole={whole} range={view.range} unit="1/min" onRange={(range) => change({ range })} />
            {layout.zoomed && <Button onClick={() => change({ range: null })}>Whole range</Button>}
          </>
        )
      }
      strip={<OverlayStrip store={store} restIndex={mostTellingIndex(data)} {...parts} />}
      table={<OverlayTable {...parts} />}
    >
      {layout.zoomed && (
        <p className="text-13 text-ink2">
          Zoomed to {numberText(data.rpm[layout.first])}–{numberText(data.rpm[layout.last])} 1/min; the upper
          axis does not start at zero.
        </p>
      )}
      <div ref={ref} className="relative">
        <svg
          role="img"
          aria-label={`${quantity.label} of A ${data.labelA} and B ${data.labelB} over engine speed, and their difference. ${summary}`}
          viewBox={`0 0 ${width} ${OVERLAY_BOX.height}`}
          height={OVERLAY_BOX.height}
          className="isolate block w-full"
        >
          <OverlayPlot
            {...parts}
            layout={layout}
            everyRun={view.everyRun}
            fills={fillIds(base)}
            clipId={`${base}clip`}
          />
        </svg>
        {!still && (
          <>
            <svg
              aria-hidden="true"
              viewBox={`0 0 ${width} ${OVERLAY_BOX.height}`}
              className="pointer-events-none absolute inset-0 size-full"
            >
              <OverlayCursor store={store} {...parts} layout={layout} />
            </svg>
            <CursorPad
              store={store}
              xs={data.rpm}
              first={layout.first}
              last={layout.last}
              left={OVERLAY_BOX.left}
              right={layout.right}
              height={OVERLAY_BOX.deltaBottom}
              axisName="engine speed"
              summaryId={summaryId}
              speak={speak}
              position={(index) => `${numberText(data.rpm[index])} per minute`}
              onRange={(range) => change({ range })}
              onReset={() => change({ range: null })}
            />
          </>
        )}
      </div>
    </ChartFigure>
  );
}
