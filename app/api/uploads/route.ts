import { parseJson, route } from "@/lib/http/respond";
import { openUpload } from "@/lib/services/uploads/begin";
import { beginUpload } from "@/lib/services/uploads/schema";

/** Begins an upload: {purpose, fileName, sizeBytes, sha256} → its state. */
export const POST = route(async ({ ctx, request }) => openUpload(ctx, await parseJson(request, beginUpload)));
