"use client";

import { type ReactNode, useMemo } from "react";
import type { Series } from "@/components/charts/frame/series";
import { PanelStack } from "@/components/charts/stack/panel-stack";
import type { StackData } from "@/components/charts/stack/stack-types";
import { numberText } from "@/components/ui/data/number-text";

export interface Trace {
  id: string;
  label: string;
  unit: string;
  decimals: number;
  values: Series;
}

export interface TraceSegment {
  kind: "pull" | "coast-down" | "sprint";
  fromS: number;
  toS: number;
}

export interface TraceMask {
  fromS: number;
  toS: number;
  /** Why it was left out or is warned of, e.g. "wheel spin". */
  why: string;
  kind: "masked" | "noted";
}

export interface TraceChartProps {
  title: ReactNode;
  /** Seconds, rising; zero is the start of the record or of the event, as the page says. */
  timeS: readonly number[];
  traces: readonly Trace[];
  segments?: readonly TraceSegment[];
  masks?: readonly TraceMask[];
  notes?: readonly string[];
  still?: boolean;
  /** Name by which links on the page zoom this chart to a span: see `spanHash`. */
  anchor?: string;
}

/** What the logger recorded, one small panel a channel over time, with the stretches found in it. */
export function TraceChart({
  title,
  timeS,
  traces,
  segments = [],
  masks = [],
  notes,
  still,
  anchor,
}: TraceChartProps) {
  const data = useMemo<StackData>(
    () => ({
      x: timeS,
      axis: { title: "time, s", name: "time", unit: "s", spokenUnit: "seconds", decimals: 2 },
      panels: traces.map(({ id, label, unit, decimals, values }) => ({
        id,
        label,
        unit,
        decimals,
        lines: [{ values, kind: "one" }],
      })),
      spans: segments.map((segment) => ({ from: segment.fromS, to: segment.toS, label: segment.kind })),
      masks: masks.map(({ fromS, toS, why, kind }) => ({ from: fromS, to: toS, why, kind })),
    }),
    [timeS, traces, segments, masks],
  );
  return (
    <PanelStack
      title={title}
      data={data}
      summary={describeTraces({ timeS, traces, segments, masks })}
      notes={notes}
      caption={`${traces.map((trace) => trace.label).join(", ")} over time`}
      still={still}
      anchor={anchor}
    />
  );
}

/** The traces in words: how long, which stretches were found, which were left out and why. */
export function describeTraces({
  timeS,
  segments = [],
  masks = [],
}: Pick<TraceChartProps, "timeS" | "traces" | "segments" | "masks">): string {
  const seconds = (value: number | undefined) => numberText(value, { decimals: 2 });
  const span = (from: number, to: number) => `from ${seconds(from)} to ${seconds(to)} s`;
  const length = (timeS.at(-1) ?? 0) - (timeS[0] ?? 0);
  const found = segments.map((segment) => `${segment.kind} ${span(segment.fromS, segment.toS)}`);
  const told = (kind: TraceMask["kind"]) =>
    masks
      .filter((mask) => mask.kind === kind)
      .map((mask) => `${span(mask.fromS, mask.toS)} (${mask.why})`)
      .join("; ");
  const [left, noted] = [told("masked"), told("noted")];
  return [
    `${numberText(length, { decimals: 1 })} s recorded.`,
    found.length > 0 ? `Found: ${found.join("; ")}.` : "No pull, coast-down or sprint was found.",
    left && `Left out: ${left}.`,
    noted && `Warned of: ${noted}.`,
  ]
    .filter(Boolean)
    .join(" ");
}
