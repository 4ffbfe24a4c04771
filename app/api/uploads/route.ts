import { readJson, route } from "@/lib/http/respond";
import { openUpload } from "@/lib/services/uploads/begin";
import type { BeginUpload } from "@/lib/services/uploads/schema";

/** Begins an upload: {purpose, fileName, sizeBytes, sha256} → its state. */
export const POST = route(async ({ ctx, request }) => openUpload(ctx, await readJson<BeginUpload>(request)));
