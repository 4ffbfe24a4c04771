"use client";

import { type ReactNode, useMemo } from "react";
import type { Series } from "@/components/charts/frame/series";
import { PanelStack } from "@/components/charts/stack/panel-stack";
import type { StackData } from "@/components/charts/stack/stack-types";
import { numberText } from "@/components/ui/data/number-text";

export interface CurveQuantity {
  id: string;
  label: string;
  unit: string;
  decimals: number;
  values: Series;
  /** Ends of an uncertainty band. */
  low?: Series;
  high?: Series;
  /** A second curve of the same quantity, e.g. referred to standard air. */
  other?: { label: string; values: Series };
  /** Name of `values` where there is an `other`. */
  valuesLabel?: string;
}

export interface CurveChartProps {
  title: ReactNode;
  /** Ascending grid, 1/min. */
  rpm: readonly number[];
  quantities: readonly CurveQuantity[];
  notes?: readonly string[];
  still?: boolean;
}

/** Power and torque of one run or one side over engine speed, each in its own panel: never two axes in one. */
export function CurveChart({ title, rpm, quantities, notes, still }: CurveChartProps) {
  const data = useMemo<StackData>(
    () => ({
      x: rpm,
      axis: {
        title: "engine speed, 1/min",
        name: "engine speed",
        unit: "1/min",
        spokenUnit: "per minute",
        decimals: 0,
      },
      panelHeight: 190,
      panels: quantities.map(({ id, label, unit, decimals, values, low, high, other, valuesLabel }) => ({
        id,
        label,
        unit,
        decimals,
        fromZero: true,
        lines: [
          { values, low, high, kind: "b", label: valuesLabel },
          ...(other ? [{ values: other.values, kind: "a" as const, label: other.label }] : []),
        ],
      })),
    }),
    [rpm, quantities],
  );
  const top = quantities[0] ? highestIndex(quantities[0].values) : -1;
  return (
    <PanelStack
      title={title}
      data={data}
      summary={describeCurves(rpm, quantities)}
      notes={notes}
      caption={`${quantities.map((quantity) => quantity.label).join(" and ")} over engine speed`}
      rest={top === -1 ? null : { index: top, note: `at the highest ${quantities[0]?.label.toLowerCase()}` }}
      still={still}
    />
  );
}

/** The curves in words: the highest value of each and where it lies. */
export function describeCurves(rpm: readonly number[], quantities: readonly CurveQuantity[]): string {
  return quantities
    .map(({ label, unit, decimals, values, low, high }) => {
      const at = highestIndex(values);
      if (at === -1) return `${label}: no values.`;
      const [under, over] = [low?.[at], high?.[at]];
      const width =
        typeof under === "number" && typeof over === "number"
          ? ` ± ${numberText((over - under) / 2, { decimals })}`
          : "";
      return `${label}: highest ${numberText(values[at], { decimals })}${width} ${unit} at ${numberText(rpm[at])} per minute.`;
    })
    .join(" ");
}

function highestIndex(values: Series): number {
  let best = -1;
  values.forEach((value, index) => {
    if (typeof value === "number" && (best === -1 || value > (values[best] ?? Number.NEGATIVE_INFINITY)))
      best = index;
  });
  return best;
}
