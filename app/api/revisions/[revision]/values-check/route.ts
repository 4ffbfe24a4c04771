import { InvalidInputError } from "@/lib/errors";
import { requireUuid, route } from "@/lib/http/respond";
import { checkValuesFile } from "@/lib/services/change-sets/check-values-file";

/** Holds a revision's values against a values file: the body, raw bytes, which is not kept. No proxy stands in front of this path. */
export const POST = route<{ revision: string }>(async ({ ctx, request, params }) => {
  if (!request.body) throw new InvalidInputError("no_body", "The request carries no file.");
  return checkValuesFile(ctx, {
    revisionId: requireUuid(params.revision),
    body: request.body as unknown as AsyncIterable<Uint8Array>,
  });
});
