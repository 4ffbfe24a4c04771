import { timesDifference } from "@/lib/compare/times/times-difference";
import type { Campaign, CampaignRun, DeltaResult, RunResult } from "@/lib/measure/types";

/** A comparison of times alone: no curve, no band, nothing claimed over engine speed. */
function timesOnly(basis: DeltaResult["basis"], level: number): DeltaResult {
  return {
    quantity: "engine_nm",
    basis,
    rpm: [],
    pct: [],
    low_pct: [],
    high_pct: [],
    abs_nm: [],
    level,
    simultaneous: false,
    method: "Times only: there are no usable pulls of both sides, so there is no curve to compare.",
    regions: [],
    resolvable_pct: [],
    drift_pct_per_run: null,
    twins: [],
  };
}

/**
 * Adds the difference of times to a comparison: of the pulls that are compared (`pullIds`) and of all usable sprints. Sprints of
 * both sides alone make a comparison of times. Null when there is neither.
 */
export function addTimes(
  delta: DeltaResult | null,
  { runs, compare, settings }: Pick<Campaign, "runs" | "compare" | "settings">,
  results: readonly RunResult[],
  pullIds: ReadonlySet<string>,
  basis: DeltaResult["basis"],
): DeltaResult | null {
  if (!compare) return delta;
  const counts = (run: CampaignRun, k: number) =>
    results[k].usable && (run.kind === "sprint" || pullIds.has(run.id));
  const timed = runs.flatMap((run, k) => {
    const { times_s, times_uncertainty_s, fall_effect_s, fall_effect_uncertainty_s } = results[k];
    if (run.kind === "coast-down" || !counts(run, k) || !times_s) return [];
    return [
      {
        id: run.id,
        kind: run.kind,
        side: run.side ?? "",
        leg: run.leg ?? null,
        order: run.order ?? null,
        roadDay: run.road_day ?? null,
        timesS: times_s,
        uncertaintiesS: times_uncertainty_s ?? {},
        fallEffectsS: fall_effect_s ?? {},
        fallUncertaintiesS: fall_effect_uncertainty_s ?? {},
      },
    ];
  });
  const { times, warnings } = timesDifference(timed, { ...compare, level: settings.level });
  if (!delta && Object.keys(times).length === 0) return null;
  const base = delta ?? timesOnly(basis, settings.level);
  return { ...base, times_difference: times, warnings: [...(base.warnings ?? []), ...warnings] };
}
