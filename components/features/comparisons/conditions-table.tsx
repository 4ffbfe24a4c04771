import type { ReactNode } from "react";
import { numberText } from "@/components/ui/data/number-text";
import { Table } from "@/components/ui/data/table";
import type { SideConditions, Spread } from "@/lib/services/comparisons/schema";

interface Line {
  what: string;
  a: ReactNode;
  b: ReactNode;
  difference: ReactNode;
}

const NOT_RECORDED = "not recorded";

function spreadText(spread: Spread | null, unit: string, decimals: number): string {
  if (!spread) return NOT_RECORDED;
  const low = numberText(spread.min, { decimals });
  const high = numberText(spread.max, { decimals });
  return low === high ? `${low} ${unit}` : `${low} to ${high} ${unit}`;
}

const words = (items: readonly (string | number)[]) => (items.length > 0 ? items.join("; ") : NOT_RECORDED);

function lines(A: SideConditions, B: SideConditions): Line[] {
  const measured = (
    what: string,
    key: "tempC" | "pressureHpa" | "humidityPct" | "massKg" | "tyreFrontKpa" | "tyreRearKpa",
    unit: string,
    decimals: number,
    differenceUnit = unit,
  ): Line => {
    const a = A[key];
    const b = B[key];
    return {
      what,
      a: spreadText(a, unit, decimals),
      b: spreadText(b, unit, decimals),
      difference:
        a && b ? `${numberText(b.mean - a.mean, { decimals, signed: true })} ${differenceUnit}` : "–",
    };
  };
  const told = (what: string, key: "gears" | "fuel" | "wind"): Line => {
    const a = words(A[key]);
    const b = words(B[key]);
    return { what, a, b, difference: a === b ? "alike" : "differs" };
  };
  const days = (side: SideConditions) => words(side.roadDays.map((day) => `${day.day}, ${day.stripName}`));
  return [
    {
      what: "Runs that count",
      a: A.runs,
      b: B.runs,
      difference: numberText(B.runs - A.runs, { signed: true }),
    },
    {
      what: "Road days",
      a: days(A),
      b: days(B),
      difference: days(A) === days(B) ? "alike" : "differs",
    },
    measured("Air temperature", "tempC", "°C", 1, "K"),
    measured("Air pressure", "pressureHpa", "hPa", 0),
    measured("Humidity", "humidityPct", "%", 0),
    measured("Test mass", "massKg", "kg", 0),
    told("Gear", "gears"),
    measured("Tyres front", "tyreFrontKpa", "kPa", 0),
    measured("Tyres rear", "tyreRearKpa", "kPa", 0),
    told("Fuel", "fuel"),
    told("Wind", "wind"),
  ];
}

/** Under what both sides were driven, next to each other; the difference is that of the means. */
export function ConditionsTable({
  conditions,
  labels,
}: {
  conditions: { A: SideConditions; B: SideConditions };
  labels: { a: string; b: string };
}) {
  return (
    <Table
      caption="Conditions of both sides"
      dense
      rows={lines(conditions.A, conditions.B)}
      rowKey={(line) => line.what}
      columns={[
        { key: "what", header: "Condition", rowHeader: true, cell: (line) => line.what },
        { key: "a", header: `A ${labels.a}`, cell: (line) => line.a },
        { key: "b", header: `B ${labels.b}`, cell: (line) => line.b },
        { key: "d", header: "B \u2212 A", className: "whitespace-nowrap", cell: (line) => line.difference },
      ]}
    />
  );
}
