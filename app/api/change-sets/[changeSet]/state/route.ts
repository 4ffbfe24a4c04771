import { requireUuid, route } from "@/lib/http/respond";
import { getChangeSetState } from "@/lib/services/change-sets/state";

/** How far a change set and its coverage are; polled by the page while it waits. */
export const GET = route<{ changeSet: string }>(({ ctx, params }) =>
  getChangeSetState(ctx, requireUuid(params.changeSet)),
);
