import { readJson, requireUuid, route } from "@/lib/http/respond";
import { addDescription } from "@/lib/services/descriptions/add";
import type { AddDescription } from "@/lib/services/descriptions/schema";

/** Gives a revision the description that its image is read by. Needs an Idempotency-Key. */
export const POST = route<{ revision: string }>(async ({ ctx, request, params }) =>
  addDescription(
    ctx,
    {
      ...(await readJson<Omit<AddDescription, "revisionId">>(request)),
      revisionId: requireUuid(params.revision),
    },
    request.headers.get("idempotency-key") ?? "",
  ),
);
