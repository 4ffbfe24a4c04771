import { type ChannelKeyRow, selectChannelKeysOfHeader } from "@/db/queries/channel-keys";
import type { Ctx } from "@/lib/services/ctx";

/** The newest version of the key whose header is that of the log; null where none was saved in this workspace. */
export async function findFittingKey(
  ctx: Pick<Ctx, "db" | "workspaceId">,
  headerSha256: string | null,
): Promise<ChannelKeyRow | null> {
  if (headerSha256 === null) return null;
  const { workspaceId, db } = ctx;
  const [newest] = await selectChannelKeysOfHeader(db, { workspaceId, headerSha256 });
  return newest?.key ?? null;
}
