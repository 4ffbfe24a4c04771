import { chooseFactor, weatherFactor } from "@/lib/measure/air/atmosphere";
import { factorUncertainty } from "@/lib/measure/air/weather-uncertainty";
import { type BudgetBasis, budgetBasis } from "@/lib/measure/curve/budget-basis";
import { kernelWidthRpm } from "@/lib/measure/curve/kernel-width";
import { peakOfCurve } from "@/lib/measure/curve/peak-of-curve";
import { type PowerSensitivity, powerSensitivity } from "@/lib/measure/curve/power-sensitivity";
import { type GridCurve, gridCurve, pullPoints } from "@/lib/measure/curve/pull-curve";
import { COVERAGE, combined, runParts, uncertaintyBudget } from "@/lib/measure/curve/uncertainty-budget";
import type { CampaignEstimate } from "@/lib/measure/estimate-campaign";
import { maskedSpans } from "@/lib/measure/judge/consequence";
import { judgePull } from "@/lib/measure/judge/judge-pull";
import { lossSource } from "@/lib/measure/road/loss-source";
import { carriesAbsolute } from "@/lib/measure/road/road-day";
import { pullTimes, speedDeviationMps } from "@/lib/measure/run/pull-times";
import { SPEED_SOURCES, type SpeedSource } from "@/lib/measure/speed/speed-model";
import { motionTrace } from "@/lib/measure/sprint/acceleration";
import type { FallInput } from "@/lib/measure/sprint/add-falls";
import { ownFall } from "@/lib/measure/sprint/net-fall";
import { roadFall } from "@/lib/measure/sprint/road-fall";
import { timingsOf } from "@/lib/measure/sprint/timings";
import type { Campaign, CampaignRun, FactorResult, Note, PowerCurve, RunResult } from "@/lib/measure/types";
import { evaluateSpline } from "@/lib/signal/penalised-spline";
import { RPM_RADPS } from "@/lib/units/constants";

/** A pull's torque is read from here on, s after tip-in: before, the driveline is still taken up [common practice, no source]. */
const SETTLED_S = 0.3;

const SOURCE_NAMES: Record<SpeedSource, string> = {
  undriven: "undriven wheel",
  gps: "gps",
  driven: "driven wheel",
  engineSpeed: "engine speed",
};

/** The weather factor of one run by the campaign's choice. */
function runFactor(campaign: Campaign, run: CampaignRun): FactorResult {
  const chosen = chooseFactor(campaign.settings.factor, campaign.vehicle);
  const computed = weatherFactor(chosen.id, run.weather, campaign.vehicle);
  return {
    id: chosen.id,
    value: computed.value,
    in_range: computed.in_range,
    applied: chosen.id !== "none" && computed.value !== null,
    why: [chosen.why, computed.why].filter(Boolean).join(" "),
  };
}

/** What a run's pull gives, and its curve on the common grid for the comparison. */
export interface PullResult extends FallInput {
  result: Pick<
    RunResult,
    "speed_source" | "loss" | "factor" | "curve" | "peak" | "times_s" | "times_uncertainty_s" | "notes"
  >;
  grid: GridCurve;
  /** How far smoothing reaches at each grid point, 1/min. */
  kernelRpm: (number | null)[];
  /** What moves the power at an engine speed of the grid; null elsewhere. */
  sensitivityAt: (rpm: number) => PowerSensitivity | null;
  basis: BudgetBasis;
  /** Relative standard uncertainty of the weather factor's value. */
  factorUncertainty: number;
}

/** Turns the estimate of one run into its curve, peak, times and notes. `extra`: spans that are masked for other reasons. */
export function pullResult(
  estimate: CampaignEstimate,
  index: number,
  campaign: Campaign,
  extra: readonly Note[],
): PullResult | null {
  const pull = estimate.pulls[index];
  const { run, signals } = estimate.runs[index];
  if (!pull) return null;
  const points = pullPoints(
    pull,
    pull.tipInS + SETTLED_S,
    pull.toS,
    estimate.drivelines[index],
    estimate.model.slipPerN,
    estimate.roads[index].resistanceN,
  );
  const broken = maskedSpans(extra);
  const spans = [...pull.slipping, ...broken];
  const inside = (t: number) => spans.some((s) => t >= s.from_s && t <= s.to_s);
  const grid = gridCurve(points, campaign.settings.rpm_step, inside);
  const factor = runFactor(campaign, run);
  const { day } = estimate.roads[index];
  const absolute = carriesAbsolute(day);
  const notes = pull.slipping.map(
    (span): Note => ({
      code: span.code,
      consequence: "masked",
      from_s: span.from_s,
      to_s: span.to_s,
      message:
        span.code === "wheel_spin"
          ? "The driven wheels spin; the engine speeds in this span are left out. Warm the tyres, or use a higher gear."
          : "Engine speed runs ahead of the driven wheels (clutch or converter slip); the engine speeds in this span are left out. Lock the converter, or look at the clutch.",
    }),
  );
  notes.push(...judgePull(estimate, index, campaign.vehicle, { factor, absolute, torqueNm: grid.engineNm }));
  const curve = absolute ? powerCurve(grid, factor) : null;
  const speedMps = evaluateSpline(pull.fit, points.t);
  const times = pullTimes(
    points.t,
    speedMps,
    broken,
    { deviationMps: speedDeviationMps(pull), scale: estimate.model.scaleUncertainty },
    timingsOf(campaign.settings).pairs,
  );
  const sensitivities = new Map(
    grid.rpm.map((rpm, k) => [rpm, powerSensitivity(estimate, campaign.vehicle, index, grid, k)]),
  );
  const sensitivityAt = (rpm: number) => sensitivities.get(rpm) ?? null;
  const basis = budgetBasis(estimate, campaign.vehicle, index);
  return {
    grid,
    kernelRpm: kernelWidthRpm(pull, grid, estimate.drivelines[index]),
    fall:
      roadFall(estimate.roads[index], points.t, speedMps) ??
      ownFall(signals.altitude, motionTrace(points.t, speedMps), pull.tipInS, pull.toS),
    sensitivityS: times.sensitivityS,
    sensitivityAt,
    basis,
    factorUncertainty: factorUncertainty(factor.id, run.weather, campaign.vehicle),
    result: {
      speed_source: sourceName(SPEED_SOURCES.filter((s) => signals[s] && estimate.model.channels.has(s))),
      loss: absolute
        ? {
            f0_n: day.f0N,
            f1_n_per_mps: day.f1NPerMps,
            f2_n_per_mps2: day.f2NPerMps2,
            source: lossSource(estimate, index),
          }
        : null,
      factor,
      curve,
      peak: curve && runPeak(grid, sensitivityAt, basis),
      times_s: times.times_s,
      times_uncertainty_s: times.times_uncertainty_s,
      notes,
    },
  };
}

function sourceName(sources: readonly SpeedSource[]): string {
  const names = sources.map((source) => SOURCE_NAMES[source]);
  return names.length === 1 ? names[0] : `fused (${names.join(", ")})`;
}

function powerCurve(grid: GridCurve, factor: FactorResult): PowerCurve {
  const kw = grid.engineNm.map((nm, k) => (nm === null ? null : (nm * grid.rpm[k] * RPM_RADPS) / 1000));
  const times = (values: readonly (number | null)[]) =>
    values.map((value) =>
      value === null
        ? null
        : factor.applied
          ? value * (factor.value ?? 1)
          : factor.id === "none"
            ? value
            : null,
    );
  return {
    rpm: grid.rpm,
    tractive_kw: grid.tractiveKw,
    wheel_kw: grid.wheelKw,
    engine_kw: kw,
    engine_nm: grid.engineNm,
    engine_kw_reference: times(kw),
    engine_nm_reference: times(grid.engineNm),
  };
}

function runPeak(
  grid: GridCurve,
  sensitivityAt: (rpm: number) => PowerSensitivity | null,
  basis: BudgetBasis,
): RunResult["peak"] {
  const peak = peakOfCurve(grid.rpm, grid.engineNm, true, null);
  const atPower = peak && sensitivityAt(peak.engine_kw_rpm);
  const atTorque = peak && sensitivityAt(peak.engine_nm_rpm);
  if (!peak || !atPower || !atTorque) return peak;
  const budget = uncertaintyBudget(
    runParts(atPower),
    (component) => {
      if (component === "repeatability") return "";
      return component === "wind" ? `${basis.wind} Gusts around it are added.` : basis[component];
    },
    peak.engine_kw,
  );
  return {
    ...peak,
    uncertainty_kw: budget.expanded_kw,
    uncertainty_nm: COVERAGE * combined(runParts(atTorque, "torque")) * peak.engine_nm,
    budget,
  };
}
