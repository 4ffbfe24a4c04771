import { describe, expect, it } from "vitest";
import { deltaText, describeOverlay } from "@/components/charts/overlay/describe-overlay";
import { deltaView, mostTellingIndex, type OverlayData } from "@/components/charts/overlay/overlay-types";
import { createOverlay } from "./overlay-sample";

function words(data: OverlayData, mode: "percent" | "absolute" = "percent"): string {
  const [power] = data.quantities;
  if (!power) throw new Error("no quantity");
  return describeOverlay(data, deltaView(data, power, mode)).replaceAll("\u202f", " ");
}

describe("describeOverlay", () => {
  it("names the loss before the gain, each with its range, its largest point and its half-width", () => {
    expect(words(createOverlay())).toBe(
      "A is above B by more than the band from 5 500 to 5 500 per minute, most at 5 500 (\u22122.6 ± 1.2 %). " +
        "B is above A by more than the band from 3 000 to 3 500 per minute, most at 3 000 (+3.0 ± 1.2 %). " +
        "Elsewhere no difference outside the band.",
    );
  });

  it("speaks in the unit of the quantity where that is chosen", () => {
    // 260 N·m at 3000 1/min is 81.68 kW; 3 % of it 2.45, 1.2 % of it 0.98.
    expect(words(createOverlay(), "absolute")).toContain("most at 3 000 (+2.5 ± 1.0 kW)");
  });

  it("claims nothing where nothing leaves the band", () => {
    expect(words(createOverlay({ regions: [] }))).toBe(
      "Nowhere is the difference outside the band: neither a gain nor a loss is shown.",
    );
  });

  it("names spikes and ripple of a side, also where nothing leaves the band", () => {
    const marks = [
      { side: "b", code: "spike", fromRpm: 5200, toRpm: 5300, sizePct: 2.44 },
      { side: "a", code: "ripple", fromRpm: 3000, toRpm: 4000, sizePct: -1.5 },
    ] as const;
    expect(words(createOverlay({ regions: [], marks }))).toBe(
      "Nowhere is the difference outside the band: neither a gain nor a loss is shown. " +
        "The mean curve of B has a spike from 5 200 to 5 300 per minute, +2.4 % off its local fit. " +
        "The mean curve of A has ripple from 3 000 to 4 000 per minute, \u22121.5 % off its local fit.",
    );
  });

  it("says what is missing where there is no band", () => {
    const none = Array.from({ length: 9 }, () => null);
    expect(words(createOverlay({ lowPct: none, highPct: none, regions: [], nA: 2, nB: 3 }))).toBe(
      "There is no band, so no difference is claimed: at least three usable runs a side are needed (now 2 on A, 3 on B).",
    );
  });
});

describe("deltaText", () => {
  it("prints a dash for a gap and no ± where there is no band", () => {
    const delta = { values: [null, 1.25], low: [null, null], high: [null, null], unit: "%", decimals: 1 };
    expect(deltaText(delta, 0)).toBe("– %");
    expect(deltaText(delta, 1)).toBe("+1.3 %");
  });
});

describe("mostTellingIndex", () => {
  it("prefers the largest proven difference over a larger one inside its band", () => {
    const data = createOverlay({ deltaPct: [9, 0.8, 3, 2.4, 0.6, 0.2, -0.5, -2.6, null] });
    expect(mostTellingIndex(data)).toBe(2);
    expect(mostTellingIndex(createOverlay({ regions: [], deltaPct: [9, 1, 3, 2, 1, 0, 0, 0, null] }))).toBe(
      0,
    );
    expect(mostTellingIndex(createOverlay({ regions: [], deltaPct: [null, null] }))).toBe(-1);
  });
});
