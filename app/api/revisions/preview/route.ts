import { readJson, route } from "@/lib/http/respond";
import { previewUploadedImage } from "@/lib/services/revisions/preview-image";
import type { PreviewImage } from "@/lib/services/revisions/schema";

/** What was understood of an uploaded image, before it joins the lineage. */
export const POST = route(async ({ ctx, request }) =>
  previewUploadedImage(ctx, await readJson<PreviewImage>(request)),
);
