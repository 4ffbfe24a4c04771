import { and, desc, eq, inArray, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { hasOwnJob } from "@/db/queries/analysis-versions";
import { descriptions, revisions } from "@/db/tables";

export type DescriptionRow = typeof descriptions.$inferSelect;
type Key = { workspaceId: string; descriptionId: string };

const at = ({ workspaceId, descriptionId }: Key) =>
  and(eq(descriptions.workspaceId, workspaceId), eq(descriptions.id, descriptionId));

/** Keeps a description once a programme and content. @returns the row, made now or there before */
export async function keepDescription(
  tx: Queryable,
  values: Pick<DescriptionRow, "workspaceId" | "programmeId" | "sha256" | "files" | "createdBy">,
): Promise<{ row: DescriptionRow; created: boolean }> {
  const [made] = await tx
    .insert(descriptions)
    .values(values)
    .onConflictDoNothing({ target: [descriptions.programmeId, descriptions.sha256] })
    .returning();
  if (made) return { row: made, created: true };
  const [row] = await tx
    .select()
    .from(descriptions)
    .where(
      and(
        eq(descriptions.workspaceId, values.workspaceId),
        eq(descriptions.programmeId, values.programmeId),
        eq(descriptions.sha256, values.sha256),
      ),
    );
  return { row, created: false };
}

export async function selectDescription(db: Queryable, key: Key): Promise<DescriptionRow | null> {
  const [row] = await db.select().from(descriptions).where(at(key));
  return row ?? null;
}

/** Names of the files of the description that each revision has, the main one first; absent where it has none. */
export async function selectFileNamesOf(
  db: Queryable,
  { workspaceId, revisionIds }: { workspaceId: string; revisionIds: readonly string[] },
): Promise<Map<string, string[]>> {
  const rows = await db
    .select({ id: revisions.id, files: descriptions.files })
    .from(revisions)
    .innerJoin(descriptions, eq(descriptions.id, revisions.descriptionId))
    .where(and(eq(revisions.workspaceId, workspaceId), inArray(revisions.id, [...revisionIds])));
  return new Map(rows.map(({ id, files }) => [id, files.map(({ name }) => name)]));
}

/** What was understood of a programme's descriptions, the newest first. */
export async function selectSummaries(
  db: Queryable,
  { workspaceId, programmeId, most }: { workspaceId: string; programmeId: string; most: number },
): Promise<NonNullable<DescriptionRow["summary"]>[]> {
  const rows = await db
    .select({ summary: descriptions.summary })
    .from(descriptions)
    .where(
      and(
        eq(descriptions.workspaceId, workspaceId),
        eq(descriptions.programmeId, programmeId),
        eq(descriptions.state, "read"),
      ),
    )
    .orderBy(desc(descriptions.createdAt))
    .limit(most);
  return rows.flatMap(({ summary }) => summary ?? []);
}

/** What a version of the reader made of a description. */
export type ReadOutcome =
  | { state: "read"; summary: NonNullable<DescriptionRow["summary"]>; failure: null }
  | { state: "refused"; summary: null; failure: string };

export async function settleDescription(
  tx: Queryable,
  args: Key & { readerVersion: string | null; outcome: ReadOutcome },
): Promise<void> {
  const { readerVersion, outcome } = args;
  await tx
    .update(descriptions)
    .set({ ...outcome, readerVersion })
    .where(at(args));
}

/** Descriptions that this version of the reader has not settled, without a job of their own (hasOwnJob), newest first. */
export async function selectOutdatedDescriptions(
  db: Queryable,
  { readerVersion, most }: { readerVersion: string; most: number },
): Promise<{ workspaceId: string; descriptionId: string }[]> {
  const { rows } = await db.execute<{ workspaceId: string; descriptionId: string }>(sql`
    select d.workspace_id as "workspaceId", d.id as "descriptionId" from descriptions d
    where d.reader_version is distinct from ${readerVersion}
      and not ${hasOwnJob("read-description", "descriptionId", sql`d.id`)}
    order by d.created_at desc limit ${most}`);
  return rows;
}
