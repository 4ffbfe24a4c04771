import { selectRevision } from "@/db/queries/revisions";
import { openBlob } from "@/lib/services/blobs";
import { authorise, type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { noRevision } from "@/lib/services/revisions/load";
import type { StoredBytes } from "@/storage/port";

/** Opens a revision's image for download: the bytes as they came, checked against their fingerprint; noted in the ledger. */
export async function openRevisionImage(
  ctx: Ctx,
  { revisionId }: { revisionId: string },
): Promise<StoredBytes & { fileName: string; sha256: string }> {
  authorise(ctx, "revision.download");
  const row = await selectRevision(ctx.db, { workspaceId: ctx.workspaceId, revisionId });
  if (!row) throw noRevision();
  const stored = await openBlob(ctx, row.imageSha256);
  await withTransaction(ctx, (tx, inner) =>
    appendLedger(tx, inner, {
      event: "revision.downloaded",
      subjectType: "revision",
      subjectId: row.id,
      programmeId: row.programmeId,
      data: { number: row.number, sha256: row.imageSha256 },
    }),
  );
  return { ...stored, fileName: row.imageFileName, sha256: row.imageSha256 };
}
