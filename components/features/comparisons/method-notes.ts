import { numberText } from "@/components/ui/data/number-text";
import type { CampaignResult, CampaignSettings } from "@/lib/measure/types";
import { FACTOR_WORDS } from "@/lib/services/comparisons/schema";

/** What was done to the curves, one sentence each: printed under the figure and part of what it says. */
export function methodNotes(
  result: CampaignResult,
  settings: CampaignSettings,
  basis: { sheetVersion: number; analysisVersion: string; inputSha256: string },
): string[] {
  const { delta } = result;
  const factor = result.runs.find((run) => run.usable && run.factor)?.factor;
  const air =
    (delta?.basis ?? result.sides.A?.basis) === "reference"
      ? "Curves are referred to reference air"
      : "Curves are as driven in the air of the day; no weather factor is applied";
  return [
    delta
      ? `Difference and band: ${delta.method.replace(/\.$/, "")}.`
      : "No difference: one side has no usable pull.",
    `${air}. Weather factor: ${FACTOR_WORDS[settings.factor]}.${factor?.why ? ` ${factor.why}` : ""}`,
    delta?.drift_pct_per_run === null || delta?.drift_pct_per_run === undefined
      ? "Drift over the runs could not be estimated."
      : `Drift over the runs and the direction of the legs are taken out; the drift found is ${numberText(delta.drift_pct_per_run, { decimals: 2, signed: true })} % per run.`,
    `Smoothing and losses as in analysis version ${basis.analysisVersion}, the same for both sides; grid ${settings.rpm_step} per minute; vehicle sheet version ${basis.sheetVersion}.`,
    "Power and torque at the crank are estimates under the stated mesh efficiency and inertias; they are no rating under any standard.",
    `Fingerprint of the input: ${basis.inputSha256.match(/.{8}/g)?.join(" ") ?? "not kept"}.`,
  ];
}
