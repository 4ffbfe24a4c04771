import { selectChannelKeysOfHeader } from "@/db/queries/channel-keys";
import { authorise, type Ctx } from "@/lib/services/ctx";

/** Every version of the key for a header, newest first. @throws ForbiddenError */
export async function listChannelKeys(ctx: Ctx, headerSha256: string) {
  authorise(ctx, "channel_key.save");
  const { workspaceId, db } = ctx;
  const rows = await selectChannelKeysOfHeader(db, { workspaceId, headerSha256 });
  return rows.map(({ key: { id, name, version, key, createdAt }, savedBy }) => ({
    id,
    name,
    version,
    key,
    savedBy: savedBy ?? "somebody",
    savedAt: createdAt,
  }));
}
