import type { CampaignEstimate } from "@/lib/measure/estimate-campaign";
import type { RunResult } from "@/lib/measure/types";

/** Whose coast-downs a run's losses come from: its own alone, its twin's (same side, other leg, next to it), or the road day's. */
export function lossSource(
  { runs }: Pick<CampaignEstimate, "runs">,
  index: number,
): NonNullable<RunResult["loss"]>["source"] {
  const own = runs[index].run;
  const givers = runs.filter(
    ({ run, segments }) => segments.coasts.length > 0 && (run.road_day ?? null) === (own.road_day ?? null),
  );
  if (givers.every(({ run }) => run === own)) return "run";
  const isTwin = ({ run }: (typeof givers)[number]) =>
    (run.side ?? null) === (own.side ?? null) &&
    run.leg !== own.leg &&
    Math.abs((run.order ?? 0) - (own.order ?? 0)) === 1;
  return givers.every((giver) => giver.run === own || isTwin(giver)) ? "twin" : "road day";
}
