import { and, desc, eq, isNull, ne, or, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { channelKeys, runs, users } from "@/db/tables";

export type ChannelKeyRow = typeof channelKeys.$inferSelect;
interface Header {
  workspaceId: string;
  headerSha256: string;
}

export async function selectChannelKey(
  db: Queryable,
  { workspaceId, channelKeyId }: { workspaceId: string; channelKeyId: string },
): Promise<ChannelKeyRow | null> {
  const [row] = await db
    .select()
    .from(channelKeys)
    .where(and(eq(channelKeys.workspaceId, workspaceId), eq(channelKeys.id, channelKeyId)));
  return row ?? null;
}

/** Versions of the key for a header, newest first, with who saved each. */
export async function selectChannelKeysOfHeader(db: Queryable, { workspaceId, headerSha256 }: Header) {
  return await db
    .select({ key: channelKeys, savedBy: users.name })
    .from(channelKeys)
    .innerJoin(users, eq(users.id, channelKeys.createdBy))
    .where(and(eq(channelKeys.workspaceId, workspaceId), eq(channelKeys.headerSha256, headerSha256)))
    .orderBy(desc(channelKeys.version));
}

/** Adds a version. @returns null when that version is there already */
export async function insertChannelKey(
  tx: Queryable,
  values: typeof channelKeys.$inferInsert,
): Promise<ChannelKeyRow | null> {
  const [row] = await tx
    .insert(channelKeys)
    .values(values)
    .onConflictDoNothing({ target: [channelKeys.workspaceId, channelKeys.headerSha256, channelKeys.version] })
    .returning();
  return row ?? null;
}

/** Runs of a programme whose log has a header, locked in the order of their ids. */
export async function lockRunsWithHeader(
  tx: Queryable,
  { workspaceId, headerSha256, programmeId }: Header & { programmeId: string },
) {
  return await tx
    .select()
    .from(runs)
    .where(
      and(
        eq(runs.workspaceId, workspaceId),
        eq(runs.programmeId, programmeId),
        eq(runs.headerSha256, headerSha256),
      ),
    )
    .orderBy(runs.id)
    .for("update");
}

/**
 * Has a run read with another version of a key, or with none: it waits for a new verdict.
 * @returns whether anything changed
 */
export async function setRunChannelKey(
  tx: Queryable,
  { workspaceId, runId, channelKeyId }: { workspaceId: string; runId: string; channelKeyId: string | null },
): Promise<boolean> {
  const differs =
    channelKeyId === null
      ? sql`${runs.channelKeyId} is not null`
      : or(isNull(runs.channelKeyId), ne(runs.channelKeyId, channelKeyId));
  const changed = await tx
    .update(runs)
    .set({ channelKeyId, state: "waiting", rowVersion: sql`${runs.rowVersion} + 1` })
    .where(and(eq(runs.workspaceId, workspaceId), eq(runs.id, runId), differs))
    .returning({ id: runs.id });
  return changed.length > 0;
}

/** Notes the header of a log that was attached before headers were noted. */
export async function setRunHeader(
  tx: Queryable,
  { workspaceId, runId, headerSha256 }: { workspaceId: string; runId: string; headerSha256: string },
): Promise<void> {
  await tx
    .update(runs)
    .set({ headerSha256 })
    .where(and(eq(runs.workspaceId, workspaceId), eq(runs.id, runId), isNull(runs.headerSha256)));
}
