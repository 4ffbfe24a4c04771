import type { Range, Series } from "@/components/charts/frame/series";

/** A stretch of engine speed where the whole band lies on one side of zero. */
export interface VerdictRegion {
  fromRpm: number;
  toRpm: number;
  /** `gain`: B is higher than A. `loss`: A is higher than B. */
  verdict: "gain" | "loss";
}

/** A stretch of one side's mean curve with a spike or ripple. */
export interface CurveMark {
  side: "a" | "b";
  code: "spike" | "ripple";
  fromRpm: number;
  toRpm: number;
  /** Largest deviation from the local fit, percent, signed. */
  sizePct: number;
}

/** One quantity over engine speed for both sides, on the grid of the chart. */
export interface OverlayQuantity {
  /** Stable name for the view, e.g. "torque". */
  id: string;
  /** As printed, e.g. "Engine torque". */
  label: string;
  unit: string;
  decimals: number;
  a: Series;
  b: Series;
  /** Single runs, drawn as hairlines on demand. */
  runsA?: readonly Series[];
  runsB?: readonly Series[];
  /** B − A in `unit`, with the ends of its band where there is one. */
  deltaAbs: Series;
  lowAbs: Series;
  highAbs: Series;
}

export interface OverlayView {
  quantityId: string;
  mode: "percent" | "absolute";
  /** Engine speed range in view, 1/min; null: all of it. */
  range: Range | null;
  everyRun: boolean;
}

export interface OverlayData {
  /** Ascending grid, 1/min. */
  rpm: readonly number[];
  /** At least one; with two or more a switch appears. */
  quantities: readonly OverlayQuantity[];
  /** B − A in percent of A, shared by all quantities, and its band; null = gap or no band there. */
  deltaPct: Series;
  lowPct: Series;
  highPct: Series;
  /** Confidence level of the band, e.g. 0.95. */
  level: number;
  /** The band holds over the whole curve at once, not point by point. */
  simultaneous: boolean;
  regions: readonly VerdictRegion[];
  labelA: string;
  labelB: string;
  /** Usable runs behind each mean. */
  nA: number;
  nB: number;
  /** Smallest difference worth having, percent; drawn as two thin lines in percent mode. */
  worthwhilePct?: number | null;
  marks?: readonly CurveMark[];
}

/** What the lower panel and the strip show in the chosen mode. */
export interface DeltaView {
  values: Series;
  low: Series;
  high: Series;
  unit: string;
  decimals: number;
}

/** The difference in the chosen mode. */
export function deltaView(
  data: OverlayData,
  quantity: OverlayQuantity,
  mode: OverlayView["mode"],
): DeltaView {
  return mode === "percent"
    ? { values: data.deltaPct, low: data.lowPct, high: data.highPct, unit: "%", decimals: 1 }
    : {
        values: quantity.deltaAbs,
        low: quantity.lowAbs,
        high: quantity.highAbs,
        unit: quantity.unit,
        decimals: quantity.decimals,
      };
}

/** Half the width of the band at one grid point; null where there is none. */
export function halfWidthAt(delta: DeltaView, index: number): number | null {
  const low = delta.low[index];
  const high = delta.high[index];
  return low === null || low === undefined || high === null || high === undefined ? null : (high - low) / 2;
}

/** Grid index of the largest proven difference; without a verdict that of the largest difference at all; -1: all gap. */
export function mostTellingIndex(data: OverlayData): number {
  const proven = largestIndex(data, (rpm) => data.regions.some((r) => rpm >= r.fromRpm && rpm <= r.toRpm));
  return proven === -1 ? largestIndex(data, () => true) : proven;
}

/** Grid index with the largest |B − A| in percent among the engine speeds allowed; -1 when all is gap. */
export function largestIndex(data: OverlayData, allowed: (rpm: number) => boolean): number {
  let best = -1;
  let most = -1;
  data.rpm.forEach((rpm, index) => {
    const size = Math.abs(data.deltaPct[index] ?? Number.NaN);
    if (size > most && allowed(rpm)) {
      most = size;
      best = index;
    }
  });
  return best;
}
