import { InvalidInputError } from "@/lib/errors";
import { requireUuid, route } from "@/lib/http/respond";
import { addPart } from "@/lib/services/uploads/add-part";
import { cancelUpload } from "@/lib/services/uploads/cancel";
import { getUpload } from "@/lib/services/uploads/load";

type Params = { upload: string };

/** How far an upload is, for resuming. */
export const GET = route<Params>(({ ctx, params }) => getUpload(ctx, requireUuid(params.upload)));

/** One part: raw bytes, `?offset=` first byte, Content-Length stated. No proxy stands in front of this path. */
export const PUT = route<Params>(({ ctx, params, request }) => {
  const offset = new URL(request.url).searchParams.get("offset") ?? "";
  const length = request.headers.get("content-length") ?? "";
  if (!/^\d{1,12}$/.test(offset) || !/^\d{1,9}$/.test(length) || !request.body) {
    throw new InvalidInputError(
      "part_unstated",
      "A part needs its first byte (?offset=), a Content-Length and a body.",
    );
  }
  return addPart(ctx, {
    uploadId: requireUuid(params.upload),
    offsetBytes: Number(offset),
    sizeBytes: Number(length),
    body: request.body as unknown as AsyncIterable<Uint8Array>,
    signal: request.signal,
  });
});

/** Gives an upload up. */
export const DELETE = route<Params>(async ({ ctx, params }) => {
  await cancelUpload(ctx, requireUuid(params.upload));
  return { cancelled: true };
});
