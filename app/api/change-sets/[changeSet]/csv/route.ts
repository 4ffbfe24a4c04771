import { downloadText } from "@/lib/http/download";
import { requireUuid, route } from "@/lib/http/respond";
import { exportChangeSet } from "@/lib/services/change-sets/export";

/** The changed values, before and after, as a table. */
export const GET = route<{ changeSet: string }>(
  async ({ ctx, params }) =>
    downloadText(await exportChangeSet(ctx, { changeSetId: requireUuid(params.changeSet), format: "csv" })),
  { isDownload: true },
);
