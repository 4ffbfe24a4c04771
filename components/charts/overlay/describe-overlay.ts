import {
  type CurveMark,
  type DeltaView,
  halfWidthAt,
  largestIndex,
  type OverlayData,
  type OverlayQuantity,
  type VerdictRegion,
} from "@/components/charts/overlay/overlay-types";
import { decimalsForHalfWidth, numberText } from "@/components/ui/data/number-text";

/** "+4.7 ± 2.5 kW": the difference at one grid point, digits by its half-width. */
export function deltaText(delta: DeltaView, index: number): string {
  const half = halfWidthAt(delta, index);
  const decimals = decimalsForHalfWidth(half, delta.decimals);
  const value = numberText(delta.values[index], { decimals, signed: true });
  const width = half === null ? "" : ` ± ${numberText(half, { decimals })}`;
  return `${value}${width} ${delta.unit}`;
}

/**
 * The chart in words, also its text alternative. Stretches where A is higher come first: what was lost is named before
 * what was gained.
 */
export function describeOverlay(data: OverlayData, delta: DeltaView): string {
  return [describeDifference(data, delta), ...(data.marks ?? []).map(describeMark)].join(" ");
}

function describeMark({ side, code, fromRpm, toRpm, sizePct }: CurveMark): string {
  const what = code === "spike" ? "a spike" : "ripple";
  const span =
    fromRpm === toRpm ? `at ${numberText(fromRpm)}` : `from ${numberText(fromRpm)} to ${numberText(toRpm)}`;
  return `The mean curve of ${side.toUpperCase()} has ${what} ${span} per minute, ${numberText(sizePct, { decimals: 1, signed: true })} % off its local fit.`;
}

function describeDifference(data: OverlayData, delta: DeltaView): string {
  const hasBand = delta.low.some((value) => value !== null);
  if (!hasBand) {
    return `There is no band, so no difference is claimed: at least three usable runs a side are needed (now ${data.nA} on A, ${data.nB} on B).`;
  }
  const regions = [...data.regions].sort(
    (x, y) => Number(x.verdict === "gain") - Number(y.verdict === "gain") || x.fromRpm - y.fromRpm,
  );
  if (regions.length === 0) {
    return "Nowhere is the difference outside the band: neither a gain nor a loss is shown.";
  }
  const sentences = regions.map((region) => describeRegion(data, delta, region));
  return [...sentences, "Elsewhere no difference outside the band."].join(" ");
}

function describeRegion(data: OverlayData, delta: DeltaView, region: VerdictRegion): string {
  const most = largestIndex(data, (rpm) => rpm >= region.fromRpm && rpm <= region.toRpm);
  const [upper, lower] = region.verdict === "gain" ? ["B", "A"] : ["A", "B"];
  const span = `from ${numberText(region.fromRpm)} to ${numberText(region.toRpm)} per minute`;
  const peak = most === -1 ? "" : `, most at ${numberText(data.rpm[most])} (${deltaText(delta, most)})`;
  return `${upper} is above ${lower} by more than the band ${span}${peak}.`;
}

/** What the live region says for one grid point. */
export function speakPoint(
  data: OverlayData,
  quantity: OverlayQuantity,
  delta: DeltaView,
  index: number,
): string {
  const side = (name: string, value: number | null | undefined) =>
    value === null || value === undefined
      ? `${name} no value`
      : `${name} ${numberText(value, { decimals: quantity.decimals })}`;
  const difference = deltaText(delta, index)
    .replace("+", "plus ")
    .replace("\u2212", "minus ")
    .replace("±", "plus or minus");
  return `${numberText(data.rpm[index])} per minute, ${side("A", quantity.a[index])}, ${side("B", quantity.b[index])} ${quantity.unit}, difference ${difference}`;
}
