import { download } from "@/lib/http/download";
import { requireUuid, route } from "@/lib/http/respond";
import { openRevisionImage } from "@/lib/services/revisions/open-image";

/** The image's bytes as they came. */
export const GET = route<{ revision: string }>(
  async ({ ctx, params }) =>
    download(await openRevisionImage(ctx, { revisionId: requireUuid(params.revision) })),
  { isDownload: true },
);
