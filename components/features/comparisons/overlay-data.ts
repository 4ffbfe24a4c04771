import type { OverlayData, OverlayQuantity } from "@/components/charts/overlay/overlay-types";
import type { PlottedGrid } from "@/lib/compare/plotted-grid";

function quantity(
  grid: PlottedGrid,
  key: "kw" | "nm",
  words: Pick<OverlayQuantity, "id" | "label" | "unit" | "decimals">,
): OverlayQuantity {
  const runs = key === "kw" ? "runsKw" : "runsNm";
  return {
    ...words,
    a: grid.a[key],
    b: grid.b[key],
    runsA: grid.a[runs],
    runsB: grid.b[runs],
    deltaAbs: grid[key].delta,
    lowAbs: grid[key].low,
    highAbs: grid[key].high,
  };
}

/** The common grid in the words of the chart; power first. */
export function overlayData(grid: PlottedGrid, labels: { a: string; b: string }): OverlayData {
  return {
    rpm: grid.rpm,
    quantities: [
      quantity(grid, "kw", { id: "power", label: "Engine power (estimate)", unit: "kW", decimals: 1 }),
      quantity(grid, "nm", { id: "torque", label: "Engine torque (estimate)", unit: "N·m", decimals: 1 }),
    ],
    deltaPct: grid.pct.delta,
    lowPct: grid.pct.low,
    highPct: grid.pct.high,
    level: grid.level,
    simultaneous: grid.simultaneous,
    regions: grid.regions.map((region) => ({
      fromRpm: region.from_rpm,
      toRpm: region.to_rpm,
      verdict: region.verdict,
    })),
    labelA: labels.a,
    labelB: labels.b,
    nA: grid.a.n,
    nB: grid.b.n,
    marks: (["a", "b"] as const).flatMap((side) =>
      (grid[side].anomalies ?? []).map((found) => ({
        side,
        code: found.code,
        fromRpm: found.from_rpm,
        toRpm: found.to_rpm,
        sizePct: found.size_pct,
      })),
    ),
  };
}
