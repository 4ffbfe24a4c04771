import { and, asc, eq, gt, inArray, lt, or, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { blobs, rateLimits, uploads } from "@/db/tables";

type BlobRow = Pick<typeof blobs.$inferSelect, "workspaceId" | "sha256" | "sizeBytes">;

const PAGE = 1_000;

/** Every kept file of every workspace, read a page at a time. */
export async function* allBlobs(db: Queryable): AsyncGenerator<BlobRow> {
  let after: BlobRow | undefined;
  for (;;) {
    const page: BlobRow[] = await db
      .select({ workspaceId: blobs.workspaceId, sha256: blobs.sha256, sizeBytes: blobs.sizeBytes })
      .from(blobs)
      .where(
        after &&
          or(
            gt(blobs.workspaceId, after.workspaceId),
            and(eq(blobs.workspaceId, after.workspaceId), gt(blobs.sha256, after.sha256)),
          ),
      )
      .orderBy(asc(blobs.workspaceId), asc(blobs.sha256))
      .limit(PAGE);
    yield* page;
    after = page.at(-1);
    if (page.length < PAGE) return;
  }
}

/** Which of these digests have a row, or are declared by an upload that is still under way and may soon get one. */
export async function selectKeptDigests(
  db: Queryable,
  { workspaceId, sha256s }: { workspaceId: string; sha256s: readonly string[] },
): Promise<Set<string>> {
  if (sha256s.length === 0) return new Set();
  const rows = await db
    .select({ sha256: blobs.sha256 })
    .from(blobs)
    .where(and(eq(blobs.workspaceId, workspaceId), inArray(blobs.sha256, [...sha256s])));
  const underWay = await db
    .select({ sha256: uploads.declaredSha256 })
    .from(uploads)
    .where(
      and(
        eq(uploads.workspaceId, workspaceId),
        inArray(uploads.declaredSha256, [...sha256s]),
        inArray(uploads.state, ["open", "complete"]),
      ),
    );
  return new Set([...rows, ...underWay].map((row) => row.sha256));
}

/** Holds a content's digest until the transaction ends. */
export async function lockDigest(
  tx: Queryable,
  { workspaceId, sha256 }: { workspaceId: string; sha256: string },
): Promise<void> {
  await tx.execute(
    sql`select pg_advisory_xact_lock(hashtextextended(${`blob:${workspaceId}:${sha256}`}, 0))`,
  );
}

/** Ends uploads whose time is over; their parts are cleared from the store by age. @returns how many */
export async function cancelExpiredUploads(db: Queryable): Promise<number> {
  const ended = await db
    .update(uploads)
    .set({ state: "cancelled" })
    .where(and(inArray(uploads.state, ["open", "complete"]), lt(uploads.expiresAt, sql`now()`)))
    .returning({ id: uploads.id });
  return ended.length;
}

/** Forgets counts whose hour is over: they limit nothing any more, and some name an address. @returns how many */
export async function deleteOldTries(db: Queryable): Promise<number> {
  const gone = await db
    .delete(rateLimits)
    .where(lt(rateLimits.windowStart, sql`now() - interval '1 hour'`))
    .returning({ bucket: rateLimits.bucket });
  return gone.length;
}
