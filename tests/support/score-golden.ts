import type { CampaignResult } from "@/lib/measure/types";
import type { ProgrammeTruth } from "./golden-campaign";

/** Errors of a result against the simulator's truth, inside the rpm range that the truth names. */
export interface GoldenScore {
  peakPct: number;
  curveRmsPct: number;
  deltaVsRealisedPp: number;
  bandHolds: boolean;
  points: number;
}

function at(xs: readonly number[], ys: readonly (number | null)[], x: number): number | null {
  const k = xs.indexOf(x);
  return k < 0 ? null : ys[k];
}

const rms = (values: readonly number[]) =>
  Math.sqrt(values.reduce((sum, x) => sum + x * x, 0) / values.length);

/**
 * Peak: highest power of the base side's mean curve from the lower end of the range to its upper end + 400, against the highest
 * of the truth; curve: torque against the as-driven reference times the mean power factor; delta: against the true change plus
 * the realised luck of the run factors.
 */
export function scoreGolden(result: CampaignResult, truth: ProgrammeTruth): GoldenScore {
  const [low, high] = truth.evaluate_rpm;
  const { base, rpm } = truth.delta;
  const side = result.sides[base];
  const factors = truth.runs.filter((run) => run.revision === base).map((run) => run.power_factor);
  const factor = factors.reduce((sum, x) => sum + x, 0) / factors.length;
  const reference = truth.curves[base].as_driven_ref;
  const curve = reference.rpm.flatMap((x, k) => {
    const expected = reference.torque_nm[k];
    const got = at(side.rpm, side.engine_nm, x);
    return expected === null || got === null || x < low || x > high
      ? []
      : [100 * (got / (expected * factor) - 1)];
  });
  const top = Math.max(...reference.power_kw.map((kw) => kw ?? 0)) * factor;
  const got = Math.max(
    ...side.engine_kw.map((kw, k) => (side.rpm[k] >= low && side.rpm[k] <= high + 400 ? (kw ?? 0) : 0)),
  );
  const { delta } = result;
  let bandHolds = delta !== null && delta !== undefined;
  const errors: number[] = [];
  rpm.forEach((x, k) => {
    const expected = truth.delta.as_driven_delta_pct[k];
    if (!delta || expected === null || x < low || x > high) return;
    const pct = at(delta.rpm, delta.pct, x);
    const bottom = at(delta.rpm, delta.low_pct, x);
    const upper = at(delta.rpm, delta.high_pct, x);
    if (pct !== null) errors.push(pct - expected - truth.delta.realised_run_factor_bias_pct);
    bandHolds &&= bottom !== null && upper !== null && bottom <= expected && expected <= upper;
  });
  return {
    peakPct: 100 * (got / top - 1),
    curveRmsPct: rms(curve),
    deltaVsRealisedPp: rms(errors),
    bandHolds,
    points: Math.min(curve.length, errors.length),
  };
}
