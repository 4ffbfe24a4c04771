import { describe, expect, it } from "vitest";
import { nullTestOutcome } from "@/lib/compare/null-test";

const BAND = { low_pct: [-1, -0.5, null, -0.4], high_pct: [1, 0.7, null, 0.4] };

describe("the outcome of a null test", () => {
  it("is that nothing is claimed, with the band's half-width at a typical engine speed", () => {
    const outcome = nullTestOutcome({ ...BAND, regions: [] });
    // Half-widths 0.4, 0.6 and 1: the middle one.
    expect(outcome).toEqual({ verdict: "claims nothing", regions: [], halfWidthPct: 0.6 });
  });

  it("fails by what it claims, gain and loss alike", () => {
    const regions = [{ from_rpm: 3000, to_rpm: 3400, verdict: "gain" as const }];
    expect(nullTestOutcome({ ...BAND, regions })).toMatchObject({ verdict: "claims something", regions });
  });

  it("is too little without a band: then nothing could have been claimed", () => {
    const verdict = "too little";
    expect(nullTestOutcome(null)).toMatchObject({ verdict });
    expect(nullTestOutcome({ low_pct: [null], high_pct: [null], regions: [] })).toMatchObject({ verdict });
  });
});
