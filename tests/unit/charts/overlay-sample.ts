import type { OverlayData, OverlayQuantity } from "@/components/charts/overlay/overlay-types";

const RPM = [2000, 2500, 3000, 3500, 4000, 4500, 5000, 5500, 6000];
/** Percent, chosen by hand: outside the band at 3000-3500 (B higher) and at 5500 (A higher); a gap at 6000. */
const DELTA = [0.2, 0.8, 3, 2.4, 0.6, 0.2, -0.5, -2.6, null];
const HALF_WIDTH = 1.2;
const TORQUE_A = [200, 240, 260, 270, 265, 255, 240, 220, null];

function shifted(by: number): (number | null)[] {
  return DELTA.map((value) => (value === null ? null : value + by));
}

function quantity(id: string, label: string, unit: string, scale: (rpm: number) => number): OverlayQuantity {
  const a = TORQUE_A.map((value, i) => (value === null ? null : value * scale(RPM[i] ?? 0)));
  const percentOfA = (pct: readonly (number | null)[]) =>
    a.map((value, i) => {
      const share = pct[i];
      return value === null || share === null || share === undefined ? null : (value * share) / 100;
    });
  const deltaAbs = percentOfA(DELTA);
  return {
    id,
    label,
    unit,
    decimals: 1,
    a,
    b: a.map((value, i) => (value === null ? null : value + (deltaAbs[i] ?? 0))),
    runsA: [a, a],
    runsB: [a],
    deltaAbs,
    lowAbs: percentOfA(shifted(-HALF_WIDTH)),
    highAbs: percentOfA(shifted(HALF_WIDTH)),
  };
}

/** A small comparison with one gain, one loss and one gap; every part can be replaced. */
export function createOverlay(overrides: Partial<OverlayData> = {}): OverlayData {
  return {
    rpm: RPM,
    quantities: [
      quantity("power", "Engine power", "kW", (rpm) => (rpm * Math.PI) / 30_000),
      quantity("torque", "Engine torque", "N·m", () => 1),
    ],
    deltaPct: DELTA,
    lowPct: shifted(-HALF_WIDTH),
    highPct: shifted(HALF_WIDTH),
    level: 0.95,
    simultaneous: true,
    regions: [
      { fromRpm: 3000, toRpm: 3500, verdict: "gain" },
      { fromRpm: 5500, toRpm: 5500, verdict: "loss" },
    ],
    labelA: "R14",
    labelB: "R15",
    nA: 6,
    nB: 5,
    ...overrides,
  };
}
