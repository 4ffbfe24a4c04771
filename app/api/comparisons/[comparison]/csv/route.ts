import { contentDisposition } from "@/lib/http/download";
import { requireUuid, route } from "@/lib/http/respond";
import { exportComparison } from "@/lib/services/comparisons/export-csv";

/** The plotted grid as a file. */
export const GET = route<{ comparison: string }>(
  async ({ ctx, params }) => {
    const { fileName, csv } = await exportComparison(ctx, requireUuid(params.comparison));
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
