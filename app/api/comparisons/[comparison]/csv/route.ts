import { downloadCsv } from "@/lib/http/download";
import { requireUuid, route } from "@/lib/http/respond";
import { exportComparison } from "@/lib/services/comparisons/export-csv";

/** The plotted grid as a file. */
export const GET = route<{ comparison: string }>(
  async ({ ctx, params }) => downloadCsv(await exportComparison(ctx, requireUuid(params.comparison))),
  { isDownload: true },
);
