import { and, desc, eq, inArray, isNull, ne, or, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { hasOwnJob } from "@/db/queries/analysis-versions";
import { changeSets, programmes, revisions } from "@/db/tables";

export type ChangeSetRow = typeof changeSets.$inferSelect;
type Key = { workspaceId: string; changeSetId: string };
type InputKey = Pick<ChangeSetRow, "workspaceId" | "revisionAId" | "revisionBId" | "inputSha256">;

const at = ({ workspaceId, changeSetId }: Key) =>
  and(eq(changeSets.workspaceId, workspaceId), eq(changeSets.id, changeSetId));
const ofInput = (key: InputKey) =>
  and(
    eq(changeSets.workspaceId, key.workspaceId),
    eq(changeSets.revisionAId, key.revisionAId),
    eq(changeSets.revisionBId, key.revisionBId),
    eq(changeSets.inputSha256, key.inputSha256),
  );

export async function selectChangeSet(db: Queryable, key: Key): Promise<ChangeSetRow | null> {
  const [row] = await db.select().from(changeSets).where(at(key));
  return row ?? null;
}

/** The change set of exact inputs; null where nobody has asked for it. */
export async function selectChangeSetOf(db: Queryable, key: InputKey): Promise<ChangeSetRow | null> {
  const [row] = await db.select().from(changeSets).where(ofInput(key));
  return row ?? null;
}

/** As selectChangeSet, of what came out only by whose description it was read; the rest may be large. */
export async function selectChangeSetHead(db: Queryable, key: Key) {
  const [row] = await db
    .select({
      id: changeSets.id,
      workspaceId: changeSets.workspaceId,
      programmeId: changeSets.programmeId,
      revisionAId: changeSets.revisionAId,
      revisionBId: changeSets.revisionBId,
      inputSha256: changeSets.inputSha256,
      state: changeSets.state,
      readBy: sql<NonNullable<ChangeSetRow["result"]>["readBy"] | null>`${changeSets.result} ->> 'readBy'`,
    })
    .from(changeSets)
    .where(at(key));
  return row ?? null;
}

/** Digests of everything in a finished change set that can be looked at, and whose changes they are; null where there is none. */
export async function selectChangeDigests(
  db: Queryable,
  { workspaceId, changeSetId }: Key,
): Promise<{ revisionBId: string; digests: string[] } | null> {
  const { rows } = await db.execute<{ revisionBId: string; digests: string[] }>(sql`
    select revision_b_id as "revisionBId", array(
      select digest #>> '{}' from jsonb_path_query(result, '$.characteristics[*].digest') digest
      union all select digest #>> '{}' from jsonb_path_query(result, '$.uncovered[*].digest') digest) as digests
    from change_sets
    where workspace_id = ${workspaceId} and id = ${changeSetId} and state = 'ready'`);
  return rows[0] ?? null;
}

/** Opens the row of exact inputs; one that failed is opened again, a finished one stays. @returns its id and whether work is left */
export async function openChangeSet(
  tx: Queryable,
  values: InputKey & Pick<ChangeSetRow, "programmeId" | "readerVersion">,
): Promise<{ changeSetId: string; isOpen: boolean }> {
  await tx
    .insert(changeSets)
    .values(values)
    .onConflictDoUpdate({
      target: [changeSets.revisionAId, changeSets.revisionBId, changeSets.inputSha256],
      set: { state: "computing", failure: null },
      setWhere: eq(changeSets.state, "failed"),
    });
  const [row] = await tx
    .select({ id: changeSets.id, state: changeSets.state })
    .from(changeSets)
    .where(ofInput(values));
  return { changeSetId: row.id, isOpen: row.state === "computing" };
}

/** Stores what came out; a result that is there already is never replaced. */
export async function closeChangeSet(
  tx: Queryable,
  key: Key,
  outcome:
    | { state: "ready"; result: NonNullable<ChangeSetRow["result"]>; resultSha256: string }
    | { state: "failed"; failure: string },
): Promise<void> {
  await tx
    .update(changeSets)
    .set({ ...outcome, createdAt: sql`clock_timestamp()` })
    .where(and(at(key), ne(changeSets.state, "ready")));
}

/** Finished change sets in which a revision is what changed, newest first, without what came out. */
export async function selectReadyChangeSetsOf(
  db: Queryable,
  { workspaceId, revisionId }: { workspaceId: string; revisionId: string },
) {
  return await db
    .select({
      id: changeSets.id,
      workspaceId: changeSets.workspaceId,
      programmeId: changeSets.programmeId,
      revisionAId: changeSets.revisionAId,
      revisionBId: changeSets.revisionBId,
      inputSha256: changeSets.inputSha256,
    })
    .from(changeSets)
    .where(
      and(
        eq(changeSets.workspaceId, workspaceId),
        eq(changeSets.revisionBId, revisionId),
        eq(changeSets.state, "ready"),
      ),
    )
    .orderBy(desc(changeSets.createdAt));
}

/** What a change set is made of on either side. */
export interface SideRow {
  id: string;
  programmeId: string;
  number: number;
  parentId: string | null;
  imageSha256: string;
  imageFileName: string;
  imageBaseAddress: number | null;
  descriptionId: string | null;
}

const SIDE = {
  id: revisions.id,
  programmeId: revisions.programmeId,
  number: revisions.number,
  parentId: revisions.parentId,
  imageSha256: revisions.imageSha256,
  imageFileName: revisions.imageFileName,
  imageBaseAddress: revisions.imageBaseAddress,
  descriptionId: revisions.descriptionId,
};

export async function selectSides(
  db: Queryable,
  { workspaceId, revisionIds }: { workspaceId: string; revisionIds: readonly string[] },
): Promise<SideRow[]> {
  return await db
    .select(SIDE)
    .from(revisions)
    .where(and(eq(revisions.workspaceId, workspaceId), inArray(revisions.id, [...revisionIds])));
}

/** Every pair with a revision on either side that was ever compared. */
export async function selectPairsOf(
  db: Queryable,
  { workspaceId, revisionId }: { workspaceId: string; revisionId: string },
) {
  return await db
    .selectDistinct({ revisionAId: changeSets.revisionAId, revisionBId: changeSets.revisionBId })
    .from(changeSets)
    .where(
      and(
        eq(changeSets.workspaceId, workspaceId),
        or(eq(changeSets.revisionAId, revisionId), eq(changeSets.revisionBId, revisionId)),
      ),
    );
}

/** Revisions of a programme that nothing has been decided on yet, and the one that stands. */
export async function selectUndecided(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
) {
  return await db
    .select({ id: revisions.id, standingId: programmes.standingRevisionId })
    .from(revisions)
    .innerJoin(programmes, eq(programmes.id, revisions.programmeId))
    .where(
      and(
        eq(revisions.workspaceId, workspaceId),
        eq(revisions.programmeId, programmeId),
        inArray(revisions.state, ["draft", "validating", "in_review"]),
        isNull(revisions.setAsideAt),
      ),
    )
    .orderBy(revisions.number);
}

/** Revisions of a programme that were not set aside, the newest first. */
export async function selectComparableRevisions(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
) {
  return await db
    .select({
      id: revisions.id,
      number: revisions.number,
      title: revisions.title,
      state: revisions.state,
    })
    .from(revisions)
    .where(
      and(
        eq(revisions.workspaceId, workspaceId),
        eq(revisions.programmeId, programmeId),
        isNull(revisions.setAsideAt),
      ),
    )
    .orderBy(desc(revisions.number));
}

/** Pairs that other versions of the reader compared and this one did not, newest first. */
export async function selectOutdatedPairs(
  db: Queryable,
  { readerVersion, most }: { readerVersion: string; most: number },
) {
  const { rows } = await db.execute<{ workspaceId: string; revisionAId: string; revisionBId: string }>(sql`
    select workspace_id as "workspaceId", revision_a_id as "revisionAId", revision_b_id as "revisionBId"
    from change_sets c
    group by workspace_id, revision_a_id, revision_b_id
    having bool_and(reader_version <> ${readerVersion})
    order by max(created_at) desc limit ${most}`);
  return rows;
}

/** Revisions that nothing was decided on and that nobody has set against what stands, though they have been there for a while. */
export async function selectUncomparedPairs(
  db: Queryable,
  { most }: { most: number },
): Promise<{ workspaceId: string; revisionAId: string; revisionBId: string }[]> {
  const { rows } = await db.execute<{ workspaceId: string; revisionAId: string; revisionBId: string }>(sql`
    select r.workspace_id as "workspaceId", p.standing_revision_id as "revisionAId", r.id as "revisionBId"
    from revisions r join programmes p on p.id = r.programme_id
    where r.state in ('draft', 'validating', 'in_review') and r.set_aside_at is null and p.archived_at is null
      and p.standing_revision_id <> r.id and r.created_at < now() - interval '10 minutes'
      and not exists (select from change_sets c
        where c.revision_a_id = p.standing_revision_id and c.revision_b_id = r.id)
    order by r.created_at desc limit ${most}`);
  return rows;
}

/** Change sets that are said to be computed although no job would bring them, e.g. after a restore; younger ones are left alone. */
export async function selectForgottenChangeSets(
  db: Queryable,
  { most }: { most: number },
): Promise<{ workspaceId: string; changeSetId: string }[]> {
  const { rows } = await db.execute<{ workspaceId: string; changeSetId: string }>(sql`
    select c.workspace_id as "workspaceId", c.id as "changeSetId" from change_sets c
    where c.state = 'computing' and c.created_at < now() - interval '10 minutes'
      and not ${hasOwnJob("compute-change-set", "changeSetId", sql`c.id`)}
    order by c.created_at desc limit ${most}`);
  return rows;
}

/** As selectForgottenChangeSets, by their coverage. */
export async function selectForgottenCoverages(
  db: Queryable,
  { most }: { most: number },
): Promise<{ workspaceId: string; changeSetId: string }[]> {
  const { rows } = await db.execute<{ workspaceId: string; changeSetId: string }>(sql`
    select distinct c.workspace_id as "workspaceId", c.change_set_id as "changeSetId" from coverages c
    where c.state = 'computing' and c.created_at < now() - interval '10 minutes'
      and not ${hasOwnJob("compute-coverage", "changeSetId", sql`c.change_set_id`)}
    limit ${most}`);
  return rows;
}
