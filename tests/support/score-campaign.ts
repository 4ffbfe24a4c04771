import type { CampaignResult } from "@/lib/measure/types";
import type { SimulatedTruth } from "./generator";

export interface Score {
  peakPct: number;
  curveRmsPct: number;
  curveBiasPct: number;
  deltaRmsPp: number;
  deltaVsRealisedPp: number;
  halfWidthPp: number;
  bandHolds: boolean | null;
  claims: string[];
}

function at(xs: readonly number[], ys: readonly (number | null)[], x: number): number | null {
  for (let i = 1; i < xs.length; i++) {
    if (xs[i] < x || xs[i - 1] > x) continue;
    const y0 = ys[i - 1];
    const y1 = ys[i];
    return y0 === null || y1 === null ? null : y0 + ((y1 - y0) * (x - xs[i - 1])) / (xs[i] - xs[i - 1]);
  }
  return null;
}

/** Scores a result against the truth, the way the simulated runs' own notes define it. */
export function scoreCampaign(result: CampaignResult, truth: SimulatedTruth): Score {
  const [lo, hi] = truth.evaluateRpm;
  const side = result.sides.A;
  const curve: number[] = [];
  let top = 0;
  truth.rpm.forEach((rpm, i) => {
    const torque = truth.referenceTorqueNm.A[i];
    if (torque === null) return;
    const expected = torque * truth.meanPowerFactor.A;
    top = Math.max(top, (expected * rpm * Math.PI) / 30_000);
    const got = side && at(side.rpm, side.engine_nm, rpm);
    if (got && rpm >= lo && rpm <= hi) curve.push(100 * (got / expected - 1));
  });
  const powers = side
    ? side.engine_kw.filter(
        (kw, i): kw is number => kw !== null && side.rpm[i] >= lo && side.rpm[i] <= hi + 400,
      )
    : [];
  const errors: number[] = [];
  const realised: number[] = [];
  const halves: number[] = [];
  let bandHolds: boolean | null = null;
  const delta = result.delta;
  truth.rpm.forEach((rpm, i) => {
    const expected = truth.deltaPct[i];
    if (!delta || expected === null || rpm < lo || rpm > hi) return;
    const got = at(delta.rpm, delta.pct, rpm);
    const low = at(delta.rpm, delta.low_pct, rpm);
    const high = at(delta.rpm, delta.high_pct, rpm);
    if (got === null) return;
    errors.push(got - expected);
    realised.push(got - expected - truth.realisedBiasPct);
    if (low === null || high === null) return;
    halves.push((high - low) / 2);
    bandHolds = (bandHolds ?? true) && low <= expected && expected <= high;
  });
  const average = (values: number[]) => values.reduce((sum, x) => sum + x, 0) / values.length;
  const rms = (values: number[]) => Math.sqrt(average(values.map((x) => x * x)));
  return {
    peakPct: 100 * (Math.max(...powers) / top - 1),
    curveRmsPct: rms(curve),
    curveBiasPct: average(curve),
    deltaRmsPp: rms(errors),
    deltaVsRealisedPp: rms(realised),
    halfWidthPp: average(halves),
    bandHolds,
    claims: (delta?.regions ?? []).map((r) => `${r.verdict} ${r.from_rpm}-${r.to_rpm}`),
  };
}
