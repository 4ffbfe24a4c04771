"use client";

import { type ReactNode, useCallback, useId, useMemo, useState } from "react";
import { ChartFigure } from "@/components/charts/frame/chart-figure";
import { CursorPad } from "@/components/charts/frame/cursor-pad";
import { createCursorStore } from "@/components/charts/frame/cursor-store";
import { fillIds } from "@/components/charts/frame/fills";
import { RangeForm } from "@/components/charts/frame/range-form";
import type { Range } from "@/components/charts/frame/series";
import { useChartWidth } from "@/components/charts/frame/use-chart-width";
import { StackCursor, StackStrip } from "@/components/charts/stack/stack-cursor";
import { stackLayout } from "@/components/charts/stack/stack-layout";
import { StackPlot } from "@/components/charts/stack/stack-plot";
import { StackTable } from "@/components/charts/stack/stack-table";
import type { StackData } from "@/components/charts/stack/stack-types";
import { useSpanHash } from "@/components/charts/stack/use-span-hash";
import { Button } from "@/components/ui/action/button";
import { numberText } from "@/components/ui/data/number-text";

export interface PanelStackProps {
  title: ReactNode;
  data: StackData;
  /** What is to be seen, in words. */
  summary: string;
  notes?: readonly string[];
  caption: string;
  /** Grid index whose values the strip shows while the cursor rests, and what that point is. */
  rest?: { index: number; note: string } | null;
  still?: boolean;
  /** Name by which links on the page zoom this chart: see `spanHash`. */
  anchor?: string;
}

/** Small multiples on one x axis with one cursor. The base of the trace and the curve chart. */
export function PanelStack({
  title,
  data,
  summary,
  notes,
  caption,
  rest,
  still = false,
  anchor,
}: PanelStackProps) {
  const base = useId();
  const { ref, width } = useChartWidth();
  const [store] = useState(createCursorStore);
  const [range, setRange] = useState<Range | null>(null);
  const layout = useMemo(() => stackLayout(data, range, width), [data, range, width]);
  const fills = useMemo(() => fillIds(base), [base]);
  const position = useCallback(
    (index: number) =>
      `${numberText(data.x[index], { decimals: data.axis.decimals })} ${data.axis.spokenUnit}`,
    [data],
  );
  const speak = useCallback(
    (index: number) =>
      [
        position(index),
        ...data.panels.flatMap((panel) =>
          panel.lines.map(
            (line) =>
              `${panel.label} ${line.label ?? ""} ${numberText(line.values[index], { decimals: panel.decimals })} ${panel.unit}`,
          ),
        ),
      ].join(", "),
    [data, position],
  );
  const summaryId = `${base}summary`;
  const choose = (next: Range | null) => {
    store.set(null);
    setRange(next);
  };
  useSpanHash(anchor, data.x, (next) => {
    choose(next);
    ref.current?.scrollIntoView({ block: "center" });
  });

  return (
    <ChartFigure
      title={title}
      summaryId={summaryId}
      summary={summary}
      notes={notes}
      onShortcut={(key) => {
        if (key !== "0") return false;
        choose(null);
        return true;
      }}
      controls={
        !still && (
          <>
            <RangeForm
              whole={{ from: data.x[0] ?? 0, to: data.x.at(-1) ?? 0 }}
              range={range}
              unit={data.axis.unit}
              onRange={choose}
            />
            {layout.zoomed && <Button onClick={() => choose(null)}>Whole range</Button>}
          </>
        )
      }
      strip={<StackStrip store={store} data={data} restIndex={rest?.index ?? null} restNote={rest?.note} />}
      table={<StackTable data={data} caption={caption} />}
    >
      <div ref={ref} className="relative">
        <svg
          role="img"
          aria-label={`${caption}. ${summary}`}
          viewBox={`0 0 ${width} ${layout.height}`}
          height={layout.height}
          className="isolate block w-full"
        >
          <StackPlot data={data} layout={layout} fills={fills} clipId={`${base}clip`} />
        </svg>
        {!still && (
          <>
            <svg
              aria-hidden="true"
              viewBox={`0 0 ${width} ${layout.height}`}
              className="pointer-events-none absolute inset-0 size-full"
            >
              <StackCursor store={store} data={data} layout={layout} />
            </svg>
            <CursorPad
              store={store}
              xs={data.x}
              first={layout.first}
              last={layout.last}
              left={layout.left}
              right={layout.right}
              height={layout.bottom}
              axisName={data.axis.name}
              summaryId={summaryId}
              speak={speak}
              position={position}
              onRange={choose}
              onReset={() => choose(null)}
            />
          </>
        )}
      </div>
    </ChartFigure>
  );
}
