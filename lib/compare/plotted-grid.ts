import type { CurveAnomaly } from "@/lib/measure/engine/smoothness-types";
import type { CampaignResult, DeltaRegion, RunResult, Series, SideResult } from "@/lib/measure/types";
import { shaftPowerW } from "@/lib/measure/vehicle/vehicle";

/** One side on the common grid; kW and N·m at the crank, estimated. */
export interface PlottedSide {
  n: number;
  kw: Series;
  nm: Series;
  /** Single usable runs on the same basis, one curve a run. */
  runsKw: Series[];
  runsNm: Series[];
  /** Spikes and ripple of the side's mean curve. */
  anomalies?: readonly CurveAnomaly[];
}

/** What the comparison draws, tabulates and exports: both sides and B − A on one grid of engine speeds. */
export interface PlottedGrid {
  /** Ascending, 1/min. */
  rpm: number[];
  basis: "reference" | "day";
  a: PlottedSide;
  b: PlottedSide;
  /** B − A in percent of A with the ends of its band; the same for power and torque at equal engine speed. */
  pct: { delta: Series; low: Series; high: Series };
  nm: { delta: Series; low: Series; high: Series };
  kw: { delta: Series; low: Series; high: Series };
  level: number;
  simultaneous: boolean;
  regions: DeltaRegion[];
}

/**
 * Values of a curve at the points of another grid: exact where the point is there, straight between two neighbours that
 * both have a value, else null. Nothing is extrapolated.
 * @param rpm ascending
 */
export function valuesAt(grid: readonly number[], rpm: readonly number[], values: Series): Series {
  let next = 0;
  return grid.map((x) => {
    while (next < rpm.length && (rpm[next] ?? Infinity) < x) next += 1;
    const high = rpm[next];
    const value = values[next] ?? null;
    if (high === undefined || value === null) return null;
    if (high === x) return value;
    const low = rpm[next - 1];
    const before = values[next - 1] ?? null;
    if (low === undefined || before === null) return null;
    return before + ((value - before) * (x - low)) / (high - low);
  });
}

function runCurves(
  runs: readonly RunResult[],
  grid: readonly number[],
  basis: PlottedGrid["basis"],
): Pick<PlottedSide, "runsKw" | "runsNm"> {
  const curves = runs.flatMap((run) => (run.usable && run.curve ? [run.curve] : []));
  const onReference = basis === "reference";
  return {
    runsKw: curves.map((curve) =>
      valuesAt(grid, curve.rpm, onReference ? curve.engine_kw_reference : curve.engine_kw),
    ),
    runsNm: curves.map((curve) =>
      valuesAt(grid, curve.rpm, onReference ? curve.engine_nm_reference : curve.engine_nm),
    ),
  };
}

const inKw = (nm: Series, rpm: readonly number[]): Series =>
  nm.map((value, index) => (value === null ? null : shaftPowerW(value, rpm[index] ?? 0) / 1000));

const shareOf = (pct: Series, of: Series): Series =>
  pct.map((value, index) => {
    const whole = of[index] ?? null;
    return value === null || whole === null ? null : (value / 100) * whole;
  });

/**
 * Brings a result onto one grid.
 * @param sideOf which side a run of the result belongs to; runs of neither are left out
 * @returns null when neither side has a curve
 */
export function plottedGrid(
  result: CampaignResult,
  sideOf: (runId: string) => "A" | "B" | null,
): PlottedGrid | null {
  const sides = [result.sides.A, result.sides.B];
  const grid = [...new Set(sides.flatMap((side) => side?.rpm ?? []))].sort((x, y) => x - y);
  if (grid.length === 0) return null;
  const delta = result.delta ?? null;
  const basis = delta?.basis ?? result.sides.A?.basis ?? result.sides.B?.basis ?? "day";
  const gap: Series = grid.map(() => null);
  const onGrid = (values: Series | undefined) => (delta && values ? valuesAt(grid, delta.rpm, values) : gap);
  const side = (name: "A" | "B", found: SideResult | undefined): PlottedSide => ({
    n: found?.n ?? 0,
    kw: found ? valuesAt(grid, found.rpm, found.engine_kw) : gap,
    nm: found ? valuesAt(grid, found.rpm, found.engine_nm) : gap,
    ...(found?.anomalies && { anomalies: found.anomalies }),
    ...runCurves(
      result.runs.filter((run) => sideOf(run.id) === name),
      grid,
      basis,
    ),
  });
  const a = side("A", result.sides.A);
  const pct = {
    delta: onGrid(delta?.pct),
    low: onGrid(delta?.low_pct),
    high: onGrid(delta?.high_pct),
  };
  const nm = {
    delta: onGrid(delta?.abs_nm),
    low: shareOf(pct.low, a.nm),
    high: shareOf(pct.high, a.nm),
  };
  return {
    rpm: grid,
    basis,
    a,
    b: side("B", result.sides.B),
    pct,
    nm,
    kw: { delta: inKw(nm.delta, grid), low: inKw(nm.low, grid), high: inKw(nm.high, grid) },
    level: delta?.level ?? 0.95,
    simultaneous: delta?.simultaneous ?? false,
    regions: delta?.regions ?? [],
  };
}
