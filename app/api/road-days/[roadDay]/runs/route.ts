import { requireUuid, route } from "@/lib/http/respond";
import { listRoadDayRuns } from "@/lib/services/runs/list";

/** Runs of a road day with the verdict of each; the page asks again while one waits. */
export const GET = route<{ roadDay: string }>(({ ctx, params }) =>
  listRoadDayRuns(ctx, requireUuid(params.roadDay)),
);
