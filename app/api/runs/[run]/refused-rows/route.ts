import { contentDisposition } from "@/lib/http/download";
import { requireUuid, route } from "@/lib/http/respond";
import { listRefusedRows } from "@/lib/services/runs/refused-rows";

/** Every row of the log that was refused, as a file. */
export const GET = route<{ run: string }>(
  async ({ ctx, params }) => {
    const { fileName, csv } = await listRefusedRows(ctx, requireUuid(params.run));
    return new Response(csv, {
      headers: {
        "content-type": "text/csv; charset=utf-8",
        "content-disposition": contentDisposition(fileName),
        "cache-control": "private, no-store",
        "x-content-type-options": "nosniff",
        "content-security-policy": "sandbox",
      },
    });
  },
  { isDownload: true },
);
