import { queryOptions } from "@tanstack/react-query";
import { callApi } from "@/lib/client/api";
import type { ChangeSetState } from "@/lib/services/change-sets/schema";

const LOOK_EVERY_MS = 1_500;

/** How far a change set and its coverage are; asked again while one of them is on its way. */
export function changeSetStateQuery(changeSetId: string) {
  return queryOptions({
    queryKey: ["change-set-state", changeSetId],
    queryFn: ({ signal }) => callApi<ChangeSetState>(`/api/change-sets/${changeSetId}/state`, { signal }),
    refetchInterval: ({ state: { data } }) =>
      !data || data.state === "computing" || data.coverage === "computing" ? LOOK_EVERY_MS : false,
    staleTime: 0,
    gcTime: 0,
  });
}
