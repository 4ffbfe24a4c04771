import type { SheetTimings } from "@/lib/measure/sprint/sheet-timings";

type Pair = SheetTimings["speedPairs"][number];

/** One pair as it is typed and read: "90-130" (km/h) or "30-90 mph". */
const pairText = ({ from, to, unit }: Pair): string => `${from}-${to}${unit === "mph" ? " mph" : ""}`;

/** A programme's own timings as its form holds them. */
export interface TypedTimings {
  speedPairs: string;
  distancesM: string;
  fallLimitPct: string;
}

/** What the form starts with. */
export function typedTimings(timings: SheetTimings | undefined): TypedTimings {
  return {
    speedPairs: timings?.speedPairs.map(pairText).join(" ") ?? "",
    distancesM: timings?.distancesM.join(" ") ?? "",
    fallLimitPct: timings?.fallLimitPct == null ? "" : String(timings.fallLimitPct),
  };
}

/** The timings as a sheet shows them, line by line. */
export function timingLines(timings: SheetTimings | undefined): { term: string; words: string | null }[] {
  const pairs = timings?.speedPairs.map((pair) => `${pairText(pair)}${pair.unit === "mph" ? "" : " km/h"}`);
  const distances = timings?.distancesM.map((wayM) => `${wayM} m`);
  return [
    { term: "Own speed ranges", words: pairs?.join(", ") || null },
    { term: "Own distances", words: distances?.join(", ") || null },
    { term: "Limit of the net fall", words: `${timings?.fallLimitPct ?? 0.5} %` },
  ];
}
