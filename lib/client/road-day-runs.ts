import { queryOptions } from "@tanstack/react-query";
import { callApi } from "@/lib/client/api";
import { roadDayRuns } from "@/lib/services/runs/schema";

const LOOK_EVERY_MS = 1_000;

/** Runs of a road day with their verdicts; asked again while one waits for its verdict. */
export function roadDayRunsQuery(roadDayId: string) {
  return queryOptions({
    queryKey: ["road-day-runs", roadDayId],
    queryFn: async ({ signal }) =>
      roadDayRuns.parse(await callApi(`/api/road-days/${roadDayId}/runs`, { signal })),
    refetchInterval: (query) => ((query.state.data?.waiting ?? 0) > 0 ? LOOK_EVERY_MS : false),
    staleTime: 0,
  });
}
