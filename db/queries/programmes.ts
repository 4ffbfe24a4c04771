import { and, asc, count, eq, gte, inArray, isNull, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { programmeShares, programmes } from "@/db/tables";

export type ProgrammeRow = Omit<typeof programmes.$inferSelect, "workspaceId">;

const columns = {
  id: programmes.id,
  name: programmes.name,
  goal: programmes.goal,
  sample: programmes.sample,
  standingRevisionId: programmes.standingRevisionId,
  nextRevisionNumber: programmes.nextRevisionNumber,
  rowVersion: programmes.rowVersion,
  archivedAt: programmes.archivedAt,
  createdBy: programmes.createdBy,
  createdAt: programmes.createdAt,
};

export async function insertProgramme(
  tx: Queryable,
  values: { workspaceId: string; name: string; goal: string; createdBy: string; sample: boolean },
): Promise<string> {
  const [row] = await tx.insert(programmes).values(values).returning({ id: programmes.id });
  return row.id;
}

export async function selectProgramme(
  db: Queryable,
  { workspaceId, programmeId }: { workspaceId: string; programmeId: string },
): Promise<ProgrammeRow | null> {
  const [row] = await db
    .select(columns)
    .from(programmes)
    .where(and(eq(programmes.workspaceId, workspaceId), eq(programmes.id, programmeId)));
  return row ?? null;
}

/** Programmes of a workspace by name; those of `sharedWith` only, when given. */
export async function selectProgrammes(
  db: Queryable,
  { workspaceId, sharedWith }: { workspaceId: string; sharedWith?: string },
): Promise<ProgrammeRow[]> {
  const shared = sharedWith
    ? db
        .select({ id: programmeShares.programmeId })
        .from(programmeShares)
        .where(and(eq(programmeShares.userId, sharedWith), inForce()))
    : undefined;
  return await db
    .select(columns)
    .from(programmes)
    .where(and(eq(programmes.workspaceId, workspaceId), shared && inArray(programmes.id, shared)))
    .orderBy(asc(programmes.name), asc(programmes.id));
}

/** Changes name and goal where the row is still as the person saw it. @returns whether it was */
export async function updateProgramme(
  tx: Queryable,
  args: { workspaceId: string; programmeId: string; rowVersion: number; name: string; goal: string },
): Promise<boolean> {
  const changed = await tx
    .update(programmes)
    .set({ name: args.name, goal: args.goal, rowVersion: sql`${programmes.rowVersion} + 1` })
    .where(
      and(
        eq(programmes.workspaceId, args.workspaceId),
        eq(programmes.id, args.programmeId),
        eq(programmes.rowVersion, args.rowVersion),
      ),
    )
    .returning({ id: programmes.id });
  return changed.length > 0;
}

/** Archives, or takes out of the archive. @returns whether that changed anything */
export async function setArchived(
  tx: Queryable,
  args: { workspaceId: string; programmeId: string; archived: boolean },
): Promise<boolean> {
  const changed = await tx
    .update(programmes)
    .set({ archivedAt: args.archived ? sql`now()` : null, rowVersion: sql`${programmes.rowVersion} + 1` })
    .where(
      and(
        eq(programmes.workspaceId, args.workspaceId),
        eq(programmes.id, args.programmeId),
        args.archived ? isNull(programmes.archivedAt) : sql`${programmes.archivedAt} is not null`,
      ),
    )
    .returning({ id: programmes.id });
  return changed.length > 0;
}

/** Until the end of the named day, in UTC. */
export function inForce() {
  return gte(programmeShares.expiresOn, sql`(now() at time zone 'UTC')::date`);
}

/** Whether a programme is shared with a person today. */
export async function isShared(
  db: Queryable,
  { workspaceId, programmeId, userId }: { workspaceId: string; programmeId: string; userId: string },
): Promise<boolean> {
  const [row] = await db
    .select({ n: count() })
    .from(programmeShares)
    .where(
      and(
        eq(programmeShares.workspaceId, workspaceId),
        eq(programmeShares.programmeId, programmeId),
        eq(programmeShares.userId, userId),
        inForce(),
      ),
    );
  return row.n > 0;
}
