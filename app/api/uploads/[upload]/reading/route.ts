import { requireUuid, route } from "@/lib/http/respond";
import { readUpload } from "@/lib/services/channel-keys/read-upload";

/** What is understood of an uploaded log before it is attached; `?roadDay=` says which car. */
export const GET = route<{ upload: string }>(({ ctx, params, request }) =>
  readUpload(ctx, {
    uploadId: requireUuid(params.upload),
    roadDayId: requireUuid(new URL(request.url).searchParams.get("roadDay") ?? ""),
  }),
);
