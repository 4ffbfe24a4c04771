import type { DeltaRegion, DeltaResult } from "@/lib/measure/types";

/** What a null test came to: one image against itself, so that whatever is claimed is wrong. */
export interface NullTestOutcome {
  /** `too little`: no band yet, so nothing could have been claimed. */
  verdict: "claims nothing" | "claims something" | "too little";
  /** What it wrongly claims, losses first. */
  regions: DeltaRegion[];
  /** Half-width of the band at a typical engine speed, %; null without a band. */
  halfWidthPct: number | null;
}

/** Half-width of the band at the engine speed in the middle of all half-widths, %; null without a band. */
function typicalHalfWidth({ low_pct, high_pct }: Pick<DeltaResult, "low_pct" | "high_pct">): number | null {
  const widths = low_pct.flatMap((low, k) => {
    const high = high_pct[k];
    return low === null || high === null || high === undefined ? [] : [(high - low) / 2];
  });
  widths.sort((a, b) => a - b);
  return widths[Math.floor(widths.length / 2)] ?? null;
}

/** Judges a null test by the verdict regions of the very comparison that judges changes; null delta: a side has no usable pull. */
export function nullTestOutcome(
  delta: Pick<DeltaResult, "low_pct" | "high_pct" | "regions"> | null | undefined,
): NullTestOutcome {
  const halfWidthPct = delta ? typicalHalfWidth(delta) : null;
  if (!delta || halfWidthPct === null) return { verdict: "too little", regions: [], halfWidthPct: null };
  const named = (verdict: DeltaRegion["verdict"]) => delta.regions.filter((r) => r.verdict === verdict);
  const regions = [...named("loss"), ...named("gain")];
  return { verdict: regions.length > 0 ? "claims something" : "claims nothing", regions, halfWidthPct };
}
