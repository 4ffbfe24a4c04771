import { downloadCsv } from "@/lib/http/download";
import { requireUuid, route } from "@/lib/http/respond";
import { listRefusedRows } from "@/lib/services/runs/refused-rows";

/** Every row of the log that was refused, as a file. */
export const GET = route<{ run: string }>(
  async ({ ctx, params }) => downloadCsv(await listRefusedRows(ctx, requireUuid(params.run))),
  { isDownload: true },
);
