import { queryOptions } from "@tanstack/react-query";
import { callApi } from "@/lib/client/api";
import { comparisonState } from "@/lib/services/comparisons/schema";

const LOOK_EVERY_MS = 1_500;

/** How far a comparison is; asked again while its result is on its way. */
export function comparisonStateQuery(comparisonId: string) {
  return queryOptions({
    queryKey: ["comparison-state", comparisonId],
    queryFn: async ({ signal }) =>
      comparisonState.parse(await callApi(`/api/comparisons/${comparisonId}/state`, { signal })),
    refetchInterval: (query) => {
      const { data } = query.state;
      return !data || data.state === "waiting" || data.recomputing ? LOOK_EVERY_MS : false;
    },
    staleTime: 0,
    gcTime: 0,
  });
}
