import { chooseFactor, weatherFactor } from "@/lib/measure/air/atmosphere";
import { factorUncertainty } from "@/lib/measure/air/weather-uncertainty";
import { type BudgetBasis, budgetBasis } from "@/lib/measure/curve/budget-basis";
import { peakOfCurve } from "@/lib/measure/curve/peak-of-curve";
import { type PowerSensitivity, powerSensitivity } from "@/lib/measure/curve/power-sensitivity";
import { type GridCurve, gridCurve, pullPoints } from "@/lib/measure/curve/pull-curve";
import { COVERAGE, combined, runParts, uncertaintyBudget } from "@/lib/measure/curve/uncertainty-budget";
import type { CampaignEstimate } from "@/lib/measure/estimate-campaign";
import { SPEED_SOURCES, type SpeedSource } from "@/lib/measure/speed/speed-model";
import { rollOnTimes } from "@/lib/measure/sprint/sprint";
import type {
  Campaign,
  CampaignRun,
  CampaignVehicle,
  FactorResult,
  Note,
  PowerCurve,
  RunResult,
} from "@/lib/measure/types";
import { rpmPerMps } from "@/lib/measure/vehicle/vehicle";
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
export interface PullResult {
  result: Pick<
    RunResult,
    "speed_source" | "loss" | "factor" | "curve" | "peak" | "times_s" | "times_uncertainty_s" | "notes"
  >;
  grid: GridCurve;
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
  const spans = [...pull.slipping, ...extra.filter((note) => note.code === "gap")];
  const inside = (t: number) => spans.some((s) => t >= (s.from_s ?? 0) && t <= (s.to_s ?? -1));
  const grid = gridCurve(points, campaign.settings.rpm_step, inside);
  const factor = runFactor(campaign, run);
  const { day } = estimate.roads[index];
  const absolute = day.coastRuns > 0;
  const notes = pull.slipping.map(
    (span): Note => ({
      code: span.code,
      from_s: span.from_s,
      to_s: span.to_s,
      message:
        span.code === "wheel_spin"
          ? "The driven wheels spin; the engine speeds in this span are left out."
          : "Engine speed runs ahead of the driven wheels (clutch or converter slip); the engine speeds in this span are left out.",
    }),
  );
  notes.push(...doubts(estimate, index, campaign.vehicle, factor, absolute));
  const curve = absolute ? powerCurve(grid, factor) : null;
  const times = rollOnTimes(
    points.t,
    evaluateSpline(pull.fit, points.t),
    0.01,
    estimate.model.scaleUncertainty,
  );
  const { coast } = estimate.runs[index].segments;
  const sensitivities = new Map(
    grid.rpm.map((rpm, k) => [rpm, powerSensitivity(estimate, campaign.vehicle, index, grid, k)]),
  );
  const sensitivityAt = (rpm: number) => sensitivities.get(rpm) ?? null;
  const basis = budgetBasis(estimate, campaign.vehicle, index);
  return {
    grid,
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
            source: day.coastRuns === 1 && coast ? "run" : "road day",
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

function doubts(
  estimate: CampaignEstimate,
  index: number,
  vehicle: CampaignVehicle,
  factor: FactorResult,
  absolute: boolean,
): Note[] {
  const notes: Note[] = [];
  const { run, segments } = estimate.runs[index];
  if (!absolute) {
    notes.push({
      code: "no_coast_down",
      message:
        "Neither this run nor its road day has a neutral coast-down over 20 km/h or more: a difference can be shown, an absolute power can't.",
    });
  } else if (!segments.coast) {
    notes.push({
      code: "no_own_coast_down",
      message: "This run has no coast-down of its own; the losses come from the road day's other runs.",
    });
  }
  const measured = estimate.model.channels.get("engineSpeed")?.scale;
  const stated = rpmPerMps(vehicle, run.gear)?.value;
  // Neighbouring gears differ by more than 12 %; tyre wear and growth stay below 4 % [common practice, no source].
  if (measured && stated && Math.abs(measured / stated - 1) > 0.06) {
    notes.push({
      code: "gear_disagrees",
      message: `Engine and road speed fit ${(100 * (measured / stated - 1)).toFixed(0)} % away from gear ${run.gear} of the vehicle sheet; what was measured is used. Check the gear and the sheet.`,
    });
  }
  if (factor.in_range === false) notes.push({ code: "factor_out_of_range", message: factor.why });
  const { track } = estimate.roads[index].run;
  if (track.located && run.leg && (run.leg === "out" ? 1 : -1) !== track.direction) {
    notes.push({
      code: "leg_disagrees",
      message: `The GPS track runs against the leg that was typed (${run.leg}). Check out and back.`,
    });
  }
  if (estimate.model.scaleFrom !== "gps") {
    notes.push({
      code: "scale_not_checked",
      message:
        "Without a GPS speed the wheel speed's scale is taken as it is; the absolute figures carry its error twice.",
    });
  }
  return notes;
}
