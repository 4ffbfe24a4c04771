import { decimalsForHalfWidth, numberText } from "@/components/ui/data/number-text";
import type { CampaignResult, DeltaRegion, DeltaResult } from "@/lib/measure/types";

/** Runs behind each side. */
type Counts = { a: number; b: number };

const span = (region: Pick<DeltaRegion, "from_rpm" | "to_rpm">) =>
  `${numberText(region.from_rpm)}–${numberText(region.to_rpm)} per minute`;

const list = (items: readonly string[]) =>
  items.length < 2 ? (items[0] ?? "") : `${items.slice(0, -1).join(", ")} and ${items.at(-1)}`;

/** A difference with its ±, or null: without a half-width it is not claimed. */
function value(name: string, amount: number, halfWidth: number | null, unit: string) {
  if (halfWidth === null) return null;
  const decimals = decimalsForHalfWidth(halfWidth, 1);
  const text = `${numberText(amount, { decimals, signed: true })} ± ${numberText(halfWidth, { decimals })} ${unit}`;
  return { amount, text: `${name} differs by ${text}` };
}

/** Both peaks with their ± and n, the smaller difference first, so that a loss is named before a gain. */
function peakSentence(peak: DeltaResult["peak_difference"], n: Counts): string | null {
  if (!peak) return null;
  const power = value("peak power", peak.engine_kw, peak.half_width_kw, "kW");
  const torque = value("peak torque", peak.engine_nm, peak.half_width_nm, "N·m");
  if (!power || !torque) return null;
  const [first, second] = power.amount >= 0 && torque.amount < 0 ? [torque, power] : [power, torque];
  return `Of the peaks, ${first.text}, ${second.text} (n ${n.a} for A, ${n.b} for B).`;
}

/** The whole comparison in a few sentences: losses before gains, then the peak, then what could have been seen. */
export function answerSentences(delta: DeltaResult, labels: { a: string; b: string }, n: Counts): string[] {
  const losses = delta.regions.filter((region) => region.verdict === "loss");
  const gains = delta.regions.filter((region) => region.verdict === "gain");
  const hasBand = delta.low_pct.some((low) => low !== null);
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
    peakSentence(delta.peak_difference, n),
    typical === undefined
      ? null
      : `These runs could have shown a difference of about ${numberText(typical, { decimals: 1 })} % at a typical engine speed.`,
  ].filter((sentence) => sentence !== null);
}

/** Spikes and ripple of both sides' mean curves, one sentence each; B first, which is the one to be decided on. */
export function anomalySentences(sides: CampaignResult["sides"], labels: { a: string; b: string }): string[] {
  return [
    { label: labels.b, found: sides.B?.anomalies ?? [] },
    { label: labels.a, found: sides.A?.anomalies ?? [] },
  ].flatMap(({ label, found }) =>
    found.map(({ code, from_rpm, to_rpm, size_pct, runs }) => {
      const what = code === "spike" ? "a spike" : "ripple";
      const size = numberText(size_pct, { decimals: 1, signed: true });
      return `The mean curve of ${label} has ${what} at ${span({ from_rpm, to_rpm })}: ${size} % off its local fit, seen in ${runs.showing} of ${runs.of} runs.`;
    }),
  );
}
