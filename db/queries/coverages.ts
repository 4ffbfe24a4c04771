import { and, desc, eq, isNull, ne, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { channelKeys, coverages, runs } from "@/db/tables";

export type CoverageRow = typeof coverages.$inferSelect;
type Key = Pick<CoverageRow, "workspaceId" | "changeSetId" | "inputSha256">;

const at = (key: Key) =>
  and(
    eq(coverages.workspaceId, key.workspaceId),
    eq(coverages.changeSetId, key.changeSetId),
    eq(coverages.inputSha256, key.inputSha256),
  );

export async function selectCoverage(db: Queryable, key: Key): Promise<CoverageRow | null> {
  const [row] = await db.select().from(coverages).where(at(key));
  return row ?? null;
}

/** As selectCoverage, how far it is and nothing else. */
export async function selectCoverageState(
  db: Queryable,
  key: Key,
): Promise<Pick<CoverageRow, "state"> | null> {
  const [row] = await db.select({ state: coverages.state }).from(coverages).where(at(key));
  return row ?? null;
}

/** The newest finished coverage of a change set, of whatever runs and links. */
export async function selectNewestCoverage(
  db: Queryable,
  { workspaceId, changeSetId }: Omit<Key, "inputSha256">,
): Promise<CoverageRow | null> {
  const [row] = await db
    .select()
    .from(coverages)
    .where(
      and(
        eq(coverages.workspaceId, workspaceId),
        eq(coverages.changeSetId, changeSetId),
        eq(coverages.state, "ready"),
      ),
    )
    .orderBy(desc(coverages.createdAt))
    .limit(1);
  return row ?? null;
}

/** Opens the row of exact inputs; one that failed is opened again, a finished one stays. @returns whether work is left */
export async function openCoverage(tx: Queryable, key: Key): Promise<boolean> {
  await tx
    .insert(coverages)
    .values(key)
    .onConflictDoUpdate({
      target: [coverages.changeSetId, coverages.inputSha256],
      set: { state: "computing", failure: null },
      setWhere: eq(coverages.state, "failed"),
    });
  return (await selectCoverageState(tx, key))?.state === "computing";
}

/** Stores what came out; a result that is there already is never replaced. */
export async function closeCoverage(
  tx: Queryable,
  key: Key,
  outcome:
    | {
        state: "ready";
        result: NonNullable<CoverageRow["result"]>;
        resultSha256: string;
        columns: NonNullable<CoverageRow["columns"]>;
      }
    | { state: "failed"; failure: string },
): Promise<void> {
  await tx
    .update(coverages)
    .set({ ...outcome, createdAt: sql`clock_timestamp()` })
    .where(and(at(key), ne(coverages.state, "ready")));
}

/** Closes what waits for other runs or links than those that count now: nothing would bring it. openCoverage opens it again when they count. */
export async function closeMovedCoverages(tx: Queryable, key: Key): Promise<void> {
  await tx
    .update(coverages)
    .set({ state: "failed", failure: "Runs or links changed meanwhile. The coverage is worked out anew." })
    .where(
      and(
        eq(coverages.workspaceId, key.workspaceId),
        eq(coverages.changeSetId, key.changeSetId),
        ne(coverages.inputSha256, key.inputSha256),
        eq(coverages.state, "computing"),
      ),
    );
}

/** Usable runs of a revision, of any kind and also of null tests, with the key that each log is read with, in order of number. */
export async function selectRunsForCoverage(
  db: Queryable,
  { workspaceId, revisionId }: { workspaceId: string; revisionId: string },
) {
  return await db
    .select({
      id: runs.id,
      number: runs.number,
      logSha256: runs.logSha256,
      logFileName: runs.logFileName,
      logBytes: runs.logBytes,
      channelKeyId: runs.channelKeyId,
      channelKey: channelKeys.key,
    })
    .from(runs)
    .leftJoin(channelKeys, eq(channelKeys.id, runs.channelKeyId))
    .where(
      and(
        eq(runs.workspaceId, workspaceId),
        eq(runs.revisionId, revisionId),
        eq(runs.state, "usable"),
        isNull(runs.setAsideAt),
      ),
    )
    .orderBy(runs.number);
}
