"use client";

import { type CursorStore, useCursorIndex } from "@/components/charts/frame/cursor-store";
import { type StripValue, ValueStrip } from "@/components/charts/frame/value-strip";
import type { StackLayout } from "@/components/charts/stack/stack-layout";
import type { StackData } from "@/components/charts/stack/stack-types";
import { numberText } from "@/components/ui/data/number-text";

/** Line through all panels with a marker on each curve. Draws nothing while the cursor rests. */
export function StackCursor({
  store,
  data,
  layout,
}: {
  store: CursorStore;
  data: StackData;
  layout: StackLayout;
}) {
  const index = useCursorIndex(store);
  const value = index === null ? undefined : data.x[index];
  if (index === null || value === undefined) return null;
  const at = layout.x(value);
  return (
    <g>
      <line x1={at} x2={at} y1={layout.top - 4} y2={layout.bottom} className="stroke-ink" />
      {layout.boxes.flatMap(({ panel, y }) =>
        panel.lines.map((line) => {
          const here = line.values[index];
          if (typeof here !== "number") return null;
          const key = `${panel.id}${line.kind}${line.label ?? ""}`;
          return line.kind === "a" ? (
            <circle key={key} cx={at} cy={y(here)} r="4.5" className="marker-a" />
          ) : (
            <rect key={key} x={at - 4} y={y(here) - 4} width="8" height="8" className="marker-b" />
          );
        }),
      )}
    </g>
  );
}

/** Values under the cursor; at rest the strip holds the places with dashes, so that nothing jumps. */
export function StackStrip({
  store,
  data,
  restIndex,
  restNote,
}: {
  store: CursorStore;
  data: StackData;
  restIndex: number | null;
  restNote?: string;
}) {
  const index = useCursorIndex(store);
  const at = index ?? restIndex;
  const read = (values: readonly (number | null)[], decimals: number) =>
    at === null ? "–" : numberText(values[at], { decimals });
  const values: StripValue[] = [
    {
      term: data.axis.title.replace(/,.*$/, "").replace(/^./, (letter) => letter.toUpperCase()),
      value: read(data.x, data.axis.decimals),
      unit: data.axis.unit,
      note: restNote && (index === null ? restNote : "under the cursor"),
    },
    ...data.panels.flatMap((panel) =>
      panel.lines.map((line) => ({
        term: panel.lines.length > 1 ? `${panel.label} ${line.label ?? ""}` : panel.label,
        marker: line.kind === "one" ? undefined : line.kind,
        value: read(line.values, panel.decimals),
        unit: panel.unit,
      })),
    ),
  ];
  return <ValueStrip values={values} />;
}
