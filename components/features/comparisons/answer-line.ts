import { decimalsForHalfWidth, numberText } from "@/components/ui/data/number-text";
import type { DeltaRegion, DeltaResult } from "@/lib/measure/types";

const span = (region: DeltaRegion) =>
  `${numberText(region.from_rpm)}–${numberText(region.to_rpm)} per minute`;

const list = (items: readonly string[]) =>
  items.length < 2 ? (items[0] ?? "") : `${items.slice(0, -1).join(", ")} and ${items.at(-1)}`;

function value(amount: number, halfWidth: number | null, unit: string): string {
  const decimals = decimalsForHalfWidth(halfWidth, 1);
  const plusMinus = halfWidth === null ? "" : ` ± ${numberText(halfWidth, { decimals })}`;
  return `${numberText(amount, { decimals, signed: true })}${plusMinus} ${unit}`;
}

/** The whole comparison in a few sentences: losses before gains, then the peak, then what could have been seen. */
export function answerSentences(delta: DeltaResult, labels: { a: string; b: string }): string[] {
  const losses = delta.regions.filter((region) => region.verdict === "loss");
  const gains = delta.regions.filter((region) => region.verdict === "gain");
  const hasBand = delta.low_pct.some((low) => low !== null);
  const peak = delta.peak_difference;
  const resolvable = delta.resolvable_pct.filter((pct) => pct !== null);
  const typical = [...resolvable].sort((x, y) => x - y)[Math.floor(resolvable.length / 2)];
  return [
    losses.length > 0 ? `Loss shown: ${labels.b} is below ${labels.a} at ${list(losses.map(span))}.` : null,
    gains.length > 0 ? `Gain shown: ${labels.b} is above ${labels.a} at ${list(gains.map(span))}.` : null,
    !hasBand
      ? "No difference is claimed: there is no band yet."
      : losses.length + gains.length === 0
        ? "Nothing shown: nowhere does the band exclude zero."
        : "Elsewhere nothing is shown.",
    peak
      ? `Peak power differs by ${value(peak.engine_kw, peak.half_width_kw, "kW")}, peak torque by ${value(peak.engine_nm, peak.half_width_nm, "N·m")}.`
      : null,
    typical === undefined
      ? null
      : `These runs could have shown a difference of about ${numberText(typical, { decimals: 1 })} % at a typical engine speed.`,
  ].filter((sentence) => sentence !== null);
}
