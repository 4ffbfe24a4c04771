import { downloadText } from "@/lib/http/download";
import { requireUuid, route } from "@/lib/http/respond";
import { exportChangeSet } from "@/lib/services/change-sets/export";

/** The changed values after the change as an ASAM CDF 2.0 file. */
export const GET = route<{ changeSet: string }>(
  async ({ ctx, params }) =>
    downloadText(await exportChangeSet(ctx, { changeSetId: requireUuid(params.changeSet), format: "cdfx" })),
  { isDownload: true },
);
