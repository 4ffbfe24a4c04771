import { meanCurve } from "@/lib/measure/curve/mean-curve";
import { peakOfCurve } from "@/lib/measure/curve/peak-of-curve";
import type { Series, SideResult } from "@/lib/measure/types";
import { RPM_RADPS } from "@/lib/units/constants";

/** What a side is made of: torque of each usable pull on one grid, on the basis that all share. */
export interface SidePull {
  engineNm: Series;
  /** Expanded relative uncertainty of the run's peak, all of it shared by the runs of a side; null when not known. */
  relativeUncertainty: number | null;
}

/**
 * Mean of a side's usable pulls. The peak's uncertainty joins the shared part of the runs' budgets with the scatter of the
 * runs' levels over √n (both expanded, k = 2); without a known budget it is null.
 */
export function sideResult(
  rpm: readonly number[],
  pulls: readonly SidePull[],
  basis: SideResult["basis"],
  absolute: boolean,
): SideResult {
  const torque = absolute ? meanCurve(pulls.map((pull) => pull.engineNm)) : rpm.map(() => null);
  const peak = peakOfCurve(rpm, torque, false, null);
  if (peak) {
    const shared = pulls.flatMap((pull) =>
      pull.relativeUncertainty === null ? [] : [pull.relativeUncertainty],
    );
    const at = rpm.indexOf(peak.engine_kw_rpm);
    const levels = pulls.flatMap((pull) => {
      const nm = pull.engineNm[at];
      const mean = torque[at];
      return nm === null || mean === null || nm === undefined ? [] : [nm / mean - 1];
    });
    const scatter =
      levels.length > 1
        ? Math.sqrt(levels.reduce((s, x) => s + x * x, 0) / (levels.length - 1) / levels.length)
        : null;
    if (shared.length > 0) {
      const mean = shared.reduce((sum, x) => sum + x, 0) / shared.length;
      peak.uncertainty_kw = peak.engine_kw * Math.hypot(mean, 2 * (scatter ?? 0));
    }
  }
  return {
    n: pulls.length,
    basis,
    rpm: [...rpm],
    engine_kw: torque.map((nm, k) => (nm === null ? null : (nm * rpm[k] * RPM_RADPS) / 1000)),
    engine_nm: torque,
    peak,
  };
}
