import { download } from "@/lib/http/download";
import { requireUuid, route } from "@/lib/http/respond";
import { openRunLog } from "@/lib/services/runs/open-log";

/** The log's bytes as they were uploaded. */
export const GET = route<{ run: string }>(
  async ({ ctx, params }) => {
    const { run, stored } = await openRunLog(ctx, requireUuid(params.run));
    return download({ ...stored, fileName: run.logFileName, sha256: run.logSha256 });
  },
  { isDownload: true },
);
