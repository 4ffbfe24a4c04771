import { readJson, route } from "@/lib/http/respond";
import { addRevision } from "@/lib/services/revisions/create";
import type { CreateRevision } from "@/lib/services/revisions/schema";

/** Adds a draft revision from an uploaded image. Needs an Idempotency-Key. */
export const POST = route(async ({ ctx, request }) =>
  addRevision(ctx, await readJson<CreateRevision>(request), request.headers.get("idempotency-key") ?? ""),
);
