import { type BudgetBasis, repeatabilityBasis } from "@/lib/measure/curve/budget-basis";
import { meanCurve } from "@/lib/measure/curve/mean-curve";
import { peakOfCurve } from "@/lib/measure/curve/peak-of-curve";
import type { PowerSensitivity } from "@/lib/measure/curve/power-sensitivity";
import { type RunScatter, runScatter } from "@/lib/measure/curve/run-scatter";
import {
  COVERAGE,
  combined,
  commonParts,
  commonUncertainty,
  type RelativeParts,
  uncertaintyBudget,
} from "@/lib/measure/curve/uncertainty-budget";
import type { Peak, Series, SideResult } from "@/lib/measure/types";
import { tQuantile } from "@/lib/signal/distributions";
import { RPM_RADPS } from "@/lib/units/constants";

/** What a side is made of: torque of each usable pull on one grid, on the basis that all share. */
export interface SidePull {
  engineNm: Series;
  /** What moves the pull's power at an engine speed; null where it has none. */
  sensitivityAt: (rpm: number) => PowerSensitivity | null;
  basis: BudgetBasis;
  /** The weather factor in the torque and how well it is known; null on the basis of the day. */
  factor: { id: string; relative: number } | null;
}

/** Usable pulls of one side; `absolute` false: no coast-down, so no figure but the difference. */
export interface SideInput {
  name: string;
  pulls: readonly SidePull[];
  absolute: boolean;
}

/**
 * Mean of each side's usable pulls with its uncertainty: what the runs share is taken whole, what differs between them by their
 * scatter over √n. The scatter is that of all sides together, one car on one strip; a single run a side shows none.
 */
export function sideResults(
  rpm: readonly number[],
  sides: readonly SideInput[],
  basis: SideResult["basis"],
): Record<string, SideResult> {
  const means = sides.map(({ pulls }) => meanCurve(pulls.map((pull) => pull.engineNm)));
  const scatter = runScatter(
    rpm,
    sides.map(({ pulls }, s) => ({ mean: means[s], curves: pulls.map((pull) => pull.engineNm) })),
  );
  return Object.fromEntries(
    sides.map((side, s) => [side.name, sideResult(rpm, side, means[s], scatter, basis)]),
  );
}

function sideResult(
  rpm: readonly number[],
  side: SideInput,
  mean: Series,
  scatter: RunScatter,
  basis: SideResult["basis"],
): SideResult {
  const torque = side.absolute ? mean : rpm.map(() => null);
  const kw = torque.map((nm, k) => (nm === null ? null : (nm * rpm[k] * RPM_RADPS) / 1000));
  const found = rpm.map((x, k) =>
    torque[k] === null
      ? []
      : side.pulls.flatMap((pull) => {
          const sensitivity = pull.sensitivityAt(x);
          return sensitivity && pull.engineNm[k] !== null ? [sensitivity] : [];
        }),
  );
  const factor = side.pulls.reduce((sum, pull) => sum + (pull.factor?.relative ?? 0), 0) / side.pulls.length;
  const own = (k: number): RelativeParts => ownParts(found[k], scatter, k);
  const peak = peakOfCurve(rpm, torque, false, null);
  return {
    n: side.pulls.length,
    basis,
    rpm: [...rpm],
    engine_kw: kw,
    engine_nm: torque,
    engine_kw_uncertainty: kw.map((value, k) =>
      value === null || found[k].length === 0
        ? null
        : COVERAGE * value * Math.hypot(commonUncertainty(found[k]), factor, combined(own(k))),
    ),
    peak: peak && {
      ...peak,
      ...peakUncertainty(rpm, side, peak, found, own, factor, scatter),
    },
  };
}

/** Scatter of the runs over √n, widened so that twice it is Student's 95 % limit; without any scatter the runs' own noise. */
function ownParts(runs: readonly PowerSensitivity[], scatter: RunScatter, k: number): RelativeParts {
  const n = runs.length;
  if (n === 0) return {};
  const spread = scatter.relative[k];
  if (spread !== null) {
    return { repeatability: ((spread / Math.sqrt(n)) * tQuantile(0.975, scatter.degrees[k])) / COVERAGE };
  }
  const noise = Math.hypot(...runs.map((run) => run.noise)) / n;
  const gust = Math.hypot(...runs.map((run) => run.gust)) / n;
  return { smoothing: noise, wind: gust };
}

function peakUncertainty(
  rpm: readonly number[],
  side: SideInput,
  peak: Peak,
  found: readonly (readonly PowerSensitivity[])[],
  own: (k: number) => RelativeParts,
  factor: number,
  scatter: RunScatter,
): Pick<Peak, "uncertainty_kw" | "uncertainty_nm" | "budget"> {
  const partsAt = (k: number, quantity: "power" | "torque") => {
    const parts = commonParts(found[k], quantity);
    const { wind, ...rest } = own(k);
    return {
      ...parts,
      wind: Math.hypot(parts.wind ?? 0, wind ?? 0),
      weather: Math.hypot(parts.weather ?? 0, factor),
      ...rest,
    };
  };
  const at = rpm.indexOf(peak.engine_kw_rpm);
  const atNm = rpm.indexOf(peak.engine_nm_rpm);
  if (found[at].length === 0 || found[atNm].length === 0)
    return { uncertainty_kw: null, uncertainty_nm: null, budget: null };
  const first = side.pulls[0];
  const budget = uncertaintyBudget(
    partsAt(at, "power"),
    (component) => {
      if (component === "repeatability")
        return repeatabilityBasis(scatter.relative[at] ?? 0, scatter.degrees[at], found[at].length);
      const sentence = first.basis[component];
      return component === "weather" && first.factor
        ? `${sentence} On the reference basis also through the factor ${first.factor.id}.`
        : sentence;
    },
    peak.engine_kw,
  );
  return {
    uncertainty_kw: budget.expanded_kw,
    uncertainty_nm: COVERAGE * combined(partsAt(atNm, "torque")) * peak.engine_nm,
    budget,
  };
}
