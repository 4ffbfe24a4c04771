"use client";

import { type ReactNode, useMemo } from "react";
import type { Series } from "@/components/charts/frame/series";
import { PanelStack } from "@/components/charts/stack/panel-stack";
import type { StackData } from "@/components/charts/stack/stack-types";
import { numberText } from "@/components/ui/data/number-text";

export interface HistoryQuantity {
  id: string;
  label: string;
  unit: string;
  decimals: number;
  /** One value an occasion; null where there is none. */
  values: Series;
  /** Ends of its interval. */
  low?: Series;
  high?: Series;
}

export interface HistoryChartProps {
  title: ReactNode;
  /** Name of each occasion in the order of time, e.g. its date. */
  occasions: readonly string[];
  /** What an occasion is, e.g. "road day". */
  occasionName: string;
  quantities: readonly HistoryQuantity[];
  notes?: readonly string[];
}

/** A few quantities over occasions in the order of time, one panel each; occasions stand at even distances. */
export function HistoryChart({ title, occasions, occasionName, quantities, notes }: HistoryChartProps) {
  const data = useMemo<StackData>(
    () => ({
      x: occasions.map((_, index) => index + 1),
      axis: {
        title: `${occasionName}, in the order driven`,
        name: occasionName,
        unit: "",
        spokenUnit: "",
        decimals: 0,
      },
      panelHeight: 110,
      panels: quantities.map(({ id, label, unit, decimals, values, low, high }) => ({
        id,
        label,
        unit,
        decimals,
        fromZero: true,
        lines: [{ values, low, high, kind: "one" as const }],
      })),
    }),
    [occasions, occasionName, quantities],
  );
  return (
    <PanelStack
      title={title}
      data={data}
      summary={describeHistory(occasions, quantities)}
      notes={notes}
      caption={`${quantities.map((quantity) => quantity.label).join(" and ")} by ${occasionName}`}
    />
  );
}

/** The course in words: first, last and largest value of each quantity. */
function describeHistory(occasions: readonly string[], quantities: readonly HistoryQuantity[]): string {
  return quantities
    .map(({ label, unit, decimals, values }) => {
      const known = values.flatMap((value, index) => (typeof value === "number" ? [{ value, index }] : []));
      const [first, last] = [known[0], known.at(-1)];
      if (!first || !last) return `${label}: no values.`;
      const top = known.reduce((best, entry) => (entry.value > best.value ? entry : best));
      const say = ({ value, index }: typeof first) =>
        `${numberText(value, { decimals })} ${unit} on ${occasions[index]}`;
      return `${label}: first ${say(first)}, last ${say(last)}, largest ${say(top)}.`;
    })
    .join(" ");
}
