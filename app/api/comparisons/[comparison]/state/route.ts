import { requireUuid, route } from "@/lib/http/respond";
import { getComparisonState } from "@/lib/services/comparisons/load";

/** How far the computation is; polled by the page while it waits. */
export const GET = route<{ comparison: string }>(({ ctx, params }) =>
  getComparisonState(ctx, requireUuid(params.comparison)),
);
