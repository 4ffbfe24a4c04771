import { and, eq, inArray, isNull, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { blobs, programmes, revisions, runs, uploads } from "@/db/tables";

export type UploadRow = typeof uploads.$inferSelect;

export async function insertUpload(
  tx: Queryable,
  values: Pick<
    typeof uploads.$inferInsert,
    "workspaceId" | "userId" | "purpose" | "fileName" | "declaredBytes" | "declaredSha256" | "stagingKey"
  >,
): Promise<UploadRow> {
  const [row] = await tx
    .insert(uploads)
    .values({ ...values, expiresAt: sql`now() + interval '24 hours'` })
    .returning();
  return row;
}

/** Lets uploads of a workspace begin one after the other, so that their sum holds. */
export async function lockOpenUploads(
  tx: Queryable,
  { workspaceId }: { workspaceId: string },
): Promise<void> {
  await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${`uploads:${workspaceId}`}, 0))`);
}

/** Declared bytes of all uploads of a workspace that are under way. */
export async function sumOpenUploads(
  db: Queryable,
  { workspaceId }: { workspaceId: string },
): Promise<number> {
  const [row] = await db
    .select({ bytes: sql<number>`coalesce(sum(${uploads.declaredBytes}), 0)::float8` })
    .from(uploads)
    .where(and(eq(uploads.workspaceId, workspaceId), inArray(uploads.state, ["open", "complete"])));
  return row.bytes;
}

/** An upload of this very person; anybody else's does not exist for them. */
export async function selectUpload(
  db: Queryable,
  { workspaceId, userId, uploadId }: { workspaceId: string; userId: string; uploadId: string },
): Promise<UploadRow | null> {
  const [row] = await db
    .select()
    .from(uploads)
    .where(and(eq(uploads.id, uploadId), eq(uploads.workspaceId, workspaceId), eq(uploads.userId, userId)));
  return row ?? null;
}

/** Moves the count of received bytes on, if it still is where the part began. @returns whether it was */
export async function advanceUpload(
  tx: Queryable,
  {
    workspaceId,
    uploadId,
    fromBytes,
    toBytes,
  }: { workspaceId: string; uploadId: string; fromBytes: number; toBytes: number },
): Promise<boolean> {
  const moved = await tx
    .update(uploads)
    .set({ receivedBytes: toBytes })
    .where(
      and(
        eq(uploads.id, uploadId),
        eq(uploads.workspaceId, workspaceId),
        eq(uploads.receivedBytes, fromBytes),
        eq(uploads.state, "open"),
      ),
    )
    .returning({ id: uploads.id });
  return moved.length === 1;
}

/** Moves an upload on from one of the states that were expected. @returns whether it was in one */
export async function setUploadState(
  tx: Queryable,
  args: { workspaceId: string; uploadId: string; from: UploadRow["state"][]; to: UploadRow["state"] },
): Promise<boolean> {
  const moved = await tx
    .update(uploads)
    .set({ state: args.to })
    .where(
      and(
        eq(uploads.id, args.uploadId),
        eq(uploads.workspaceId, args.workspaceId),
        inArray(uploads.state, args.from),
      ),
    )
    .returning({ id: uploads.id });
  return moved.length === 1;
}

/** The row that says that a content is kept: created once, whoever comes second finds it. */
export async function insertBlob(
  tx: Queryable,
  values: { workspaceId: string; sha256: string; sizeBytes: number },
): Promise<void> {
  await tx.insert(blobs).values(values).onConflictDoNothing();
}

/** Runs and revisions of the workspace that were made from the same bytes. */
export async function selectUsesOfBlob(
  db: Queryable,
  { workspaceId, sha256 }: { workspaceId: string; sha256: string },
) {
  const usedAsLog = await db
    .select({ number: runs.number, programme: programmes.name })
    .from(runs)
    .innerJoin(programmes, eq(programmes.id, runs.programmeId))
    .where(and(eq(runs.workspaceId, workspaceId), eq(runs.logSha256, sha256), isNull(runs.setAsideAt)));
  const usedAsImage = await db
    .select({ number: revisions.number, programme: programmes.name })
    .from(revisions)
    .innerJoin(programmes, eq(programmes.id, revisions.programmeId))
    .where(and(eq(revisions.workspaceId, workspaceId), eq(revisions.imageSha256, sha256)));
  return { usedAsLog, usedAsImage };
}
