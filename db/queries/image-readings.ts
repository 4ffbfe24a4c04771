import { and, desc, eq, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { hasOwnJob } from "@/db/queries/analysis-versions";
import { imageChecks, imageReadings } from "@/db/tables";

export type ImageReadingRow = typeof imageReadings.$inferSelect;
type ReadingKey = Pick<ImageReadingRow, "workspaceId" | "revisionId" | "descriptionId" | "readerVersion">;

export async function selectImageReading(db: Queryable, key: ReadingKey): Promise<ImageReadingRow | null> {
  const [row] = await db
    .select()
    .from(imageReadings)
    .where(
      and(
        eq(imageReadings.workspaceId, key.workspaceId),
        eq(imageReadings.revisionId, key.revisionId),
        eq(imageReadings.descriptionId, key.descriptionId),
        eq(imageReadings.readerVersion, key.readerVersion),
      ),
    );
  return row ?? null;
}

/** Keeps a reading; one that is there already stays. */
export async function insertImageReading(
  tx: Queryable,
  values: Omit<ImageReadingRow, "createdAt">,
): Promise<void> {
  await tx.insert(imageReadings).values(values).onConflictDoNothing();
}

/**
 * Revisions whose image this version of the reader has not read by their description, or that was never checked by the regions that
 * count now although something may still be decided on it; without a job of their own (hasOwnJob), newest first.
 */
export async function selectUnreadImages(
  db: Queryable,
  { readerVersion, most }: { readerVersion: string; most: number },
): Promise<{ workspaceId: string; revisionId: string }[]> {
  const { rows } = await db.execute<{ workspaceId: string; revisionId: string }>(sql`
    select r.workspace_id as "workspaceId", r.id as "revisionId" from revisions r
    left join descriptions d on d.id = r.description_id
    where r.set_aside_at is null
      and (
        (d.state = 'read' and not exists (select from image_readings i where i.revision_id = r.id
          and i.description_id = r.description_id and i.reader_version = ${readerVersion}))
        or (r.state in ('draft', 'validating', 'in_review', 'promoted') and r.created_at < now() - interval '10 minutes'
          and not exists (select from image_checks c where c.revision_id = r.id and c.regions_version = coalesce(
            (select max(version) from calibration_settings s where s.programme_id = r.programme_id and s.kind = 'checksum_regions'), 0))))
      and not ${hasOwnJob("read-image", "revisionId", sql`r.id`)}
    order by r.created_at desc limit ${most}`);
  return rows;
}

/** What the stored image was last found to be, for a version of the regions; null where it was not checked for it yet. */
export async function selectImageCheck(
  db: Queryable,
  args: { workspaceId: string; revisionId: string; regionsVersion: number },
) {
  const [row] = await db
    .select({ result: imageChecks.result, checkedAt: imageChecks.createdAt })
    .from(imageChecks)
    .where(
      and(
        eq(imageChecks.workspaceId, args.workspaceId),
        eq(imageChecks.revisionId, args.revisionId),
        eq(imageChecks.regionsVersion, args.regionsVersion),
      ),
    )
    .orderBy(desc(imageChecks.createdAt));
  return row ?? null;
}

/** Keeps what a check found; the newest counts. */
export async function putImageCheck(
  tx: Queryable,
  values: Omit<typeof imageChecks.$inferInsert, "createdAt">,
): Promise<void> {
  await tx
    .insert(imageChecks)
    .values(values)
    .onConflictDoUpdate({
      target: [imageChecks.revisionId, imageChecks.regionsVersion],
      set: { result: values.result, createdAt: sql`clock_timestamp()` },
    });
}
