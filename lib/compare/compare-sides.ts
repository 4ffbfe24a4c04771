import { deltaBand, upTo } from "@/lib/compare/band/delta-band";
import { type ComparedRun, carriedBy, type RunDesign, runDesign } from "@/lib/compare/band/run-design";
import { LEAST_RUNS, sideEffect } from "@/lib/compare/band/side-effect";
import { smoothingBias } from "@/lib/compare/band/smoothing-bias";
import { verdictRegions } from "@/lib/compare/band/verdict-regions";
import { defaultRanges, rangeMeans } from "@/lib/compare/range-means";
import { findTwins } from "@/lib/compare/twins";
import type { DeltaResult, Reason } from "@/lib/measure/types";
import { tQuantile } from "@/lib/signal/distributions";
import { median } from "@/lib/signal/statistics";

/**
 * Share of what a second smoothing rounds off that the band allows for: an edge is rounded by more the first time. Without it 118 of
 * 130 simulated campaigns were held whole, most misses at edges of the change; with it 501 of 520 (`npm run soak:coverage`).
 */
const ROUNDING_SHARE = 1.5;

/** A usable pull with what is compared: torque on the shared basis, its peaks. */
export interface ComparedPull extends ComparedRun {
  /** N·m on the common grid, null = gap. */
  engineNm: (number | null)[];
  /** How far the smoothing of speed reaches, 1/min, on the same grid; absent: nothing was smoothed. */
  kernelRpm?: readonly (number | null)[];
  peakKw: number | null;
  peakNm: number | null;
}

export interface CompareSettings {
  a: string;
  b: string;
  basis: "reference" | "day";
  level: number;
  seed: number;
  resamples: number;
  /** Ranges of engine speed to average over, 1/min; absent: the compared range and its thirds. */
  ranges?: readonly (readonly [number, number])[] | null;
}

/**
 * Residual variance is pooled over this much to each side: with few runs a column's own variance is luck. Measured on 200
 * simulated campaigns of 4 + 4 runs: half-width 1.9 instead of 3.5 pp, whole curve held in 95 instead of 98 of 100.
 */
const POOL_RPM = 400;

/**
 * Compares side B with side A: at every engine speed a linear model of log torque with side, leg, order and road day, and a
 * band that holds the whole curve at once (measurement.md 6.3). Null when a side has no run.
 */
export function compareSides(
  rpm: readonly number[],
  pulls: readonly ComparedPull[],
  settings: CompareSettings,
): DeltaResult | null {
  const runs = pulls.filter((pull) => pull.side === settings.a || pull.side === settings.b);
  const countOf = (side: string) => runs.filter((run) => run.side === side).length;
  if (countOf(settings.a) === 0 || countOf(settings.b) === 0) return null;
  const logs = runs.map((run) =>
    Float64Array.from(run.engineNm, (nm) => (nm !== null && nm > 0 ? Math.log(nm) : Number.NaN)),
  );
  const present = (side: string, k: number) =>
    runs.reduce((n, run, r) => n + (run.side === side && !Number.isNaN(logs[r][k]) ? 1 : 0), 0);
  const counts = rpm.map((_, k) => [present(settings.a, k), present(settings.b, k)] as const);
  const design = runDesign(runs, settings.b);
  const smallest = Math.min(countOf(settings.a), countOf(settings.b));
  const warnings: Reason[] = [...design.warnings];
  const twins = findTwins(runs, (r) => logs[r]);
  const usable =
    "matrix" in design && smallest >= LEAST_RUNS && runs.length - design.columns >= 2 ? design : null;
  const carried = usable && carriedBy(usable);
  const least = usable ? LEAST_RUNS : 1;
  const kept = rpm.flatMap((_, k) => {
    const there = logs.flatMap((log, r) => (Number.isNaN(log[k]) ? [] : [r]));
    return Math.min(...counts[k]) >= least && (!carried || carried(there)) ? [k] : [];
  });
  const grid = kept.map((k) => rpm[k]);
  const empty = grid.map(() => null);
  const meanA = kept.map((k) => meanLog(runs, logs, settings.a, k));
  const common = {
    quantity: "engine_nm" as const,
    basis: settings.basis,
    rpm: grid,
    level: settings.level,
    twins,
    peak_difference: peakDifference(runs, usable, settings),
    range_means: rangeMeans(rpm, runs, settings.ranges ?? defaultRanges(grid), usable, settings),
    warnings,
  };
  if (!usable || kept.length === 0) {
    const pct = kept.map((k, i) => 100 * Math.expm1(meanLog(runs, logs, settings.b, k) - meanA[i]));
    return {
      ...common,
      pct,
      low_pct: empty,
      high_pct: empty,
      abs_nm: pct.map((p, i) => (p / 100) * Math.exp(meanA[i])),
      simultaneous: false,
      method: noBandReason(smallest, "matrix" in design, usable !== null),
      regions: [],
      resolvable_pct: empty,
      drift_pct_per_run: null,
    };
  }
  const values = Float64Array.from(logs.flatMap((log) => kept.map((k) => log[k])));
  const band = deltaBand(values, kept.length, usable.matrix, usable.columns, usable.side, usable.order, {
    level: settings.level,
    seed: settings.seed,
    resamples: settings.resamples,
    small: smallest === LEAST_RUNS,
    pool: grid.length > 1 ? Math.round(POOL_RPM / (grid[1] - grid[0])) : 0,
  });
  const pct = (x: number) => 100 * Math.expm1(x);
  const effect = Array.from(band.effect);
  const rounded = smoothingBias(
    grid,
    effect,
    kept.map((k) => median(runs.map((run) => run.kernelRpm?.[k] ?? Number.NaN))),
  );
  const allowed = Array.from(rounded, (bias) => ROUNDING_SHARE * bias);
  const half = Array.from(band.standardError, (se, k) => band.criticalAt[k] * se + allowed[k]);
  const low = effect.map((x, k) => pct(x - half[k]));
  const high = effect.map((x, k) => pct(x + half[k]));
  // A claim must get past the whole half-width, what it allows for smoothing included, in 8 of 10 such campaigns.
  const beyond = tQuantile(0.8, band.df);
  const drift = band.orderEffect.reduce((sum, x) => sum + x, 0) / Math.max(1, kept.length);
  return {
    ...common,
    pct: effect.map(pct),
    low_pct: low,
    high_pct: high,
    abs_nm: effect.map((x, i) => Math.expm1(x) * Math.exp(meanA[i])),
    simultaneous: true,
    method: `Linear model of log torque with ${usable.names.slice(1).join(", ")}; ${band.method}, critical value ${upTo(band)}${band.critical.toFixed(3)}, ${band.df} degrees of freedom${band.method === "permutation max-t" ? `, ${settings.resamples} resamples, seed ${settings.seed}` : ", a side has only three runs"}; widened where smoothing may have rounded off an edge.`,
    regions: verdictRegions(grid, low, high),
    band: { critical_value: band.critical, df: band.df, smoothing_pct: pct(median(allowed)) },
    resolvable_pct: Array.from(band.standardError, (se, k) => pct(half[k] + beyond * se)),
    drift_pct_per_run: usable.order === null || kept.length === 0 ? null : pct(drift),
  };
}

function noBandReason(smallest: number, separable: boolean, fits: boolean): string {
  if (fits) {
    return "No engine speed is covered by enough usable runs of both sides and legs, so there is nothing to compare.";
  }
  if (smallest < LEAST_RUNS) {
    return `Difference of the sides' means only: a band needs at least ${LEAST_RUNS} usable runs a side, here a side has ${smallest}.`;
  }
  return separable
    ? "Difference of the sides' means only: too few runs are left over after side, leg and order to tell their scatter."
    : "Difference of the sides' means only: the side can't be told apart from leg, order or road day.";
}

function meanLog(
  runs: readonly ComparedPull[],
  logs: readonly Float64Array[],
  side: string,
  k: number,
): number {
  let sum = 0;
  let n = 0;
  runs.forEach((run, r) => {
    if (run.side !== side || Number.isNaN(logs[r][k])) return;
    sum += logs[r][k];
    n++;
  });
  return sum / n;
}

/** Difference of the runs' peaks by the same model; its interval stands alone, it is not part of the band. */
function peakDifference(
  runs: readonly ComparedPull[],
  design: RunDesign | null,
  settings: CompareSettings,
): DeltaResult["peak_difference"] {
  const kw = sideEffect(
    runs,
    runs.map((run) => run.peakKw),
    design,
    settings,
  );
  const nm = sideEffect(
    runs,
    runs.map((run) => run.peakNm),
    design,
    settings,
  );
  if (!kw || !nm) return null;
  return { engine_kw: kw.effect, half_width_kw: kw.half, engine_nm: nm.effect, half_width_nm: nm.half };
}
