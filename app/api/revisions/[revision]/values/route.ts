import { downloadText } from "@/lib/http/download";
import { requireUuid, route } from "@/lib/http/respond";
import { exportRevisionValues } from "@/lib/services/change-sets/export";
import { valuesFormat } from "@/lib/services/change-sets/schema";

/** All values of a revision's image as a file. Parameter: format, cdfx or csv. */
export const GET = route<{ revision: string }>(
  async ({ ctx, request, params }) => {
    const format = valuesFormat.parse(new URL(request.url).searchParams.get("format") ?? "cdfx");
    return downloadText(
      await exportRevisionValues(ctx, { revisionId: requireUuid(params.revision), format }),
    );
  },
  { isDownload: true },
);
