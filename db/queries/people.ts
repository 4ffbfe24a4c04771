import { and, count, eq, inArray, isNull, ne, or, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { memberships, rateLimits, sessions, signingPassphrases, users, workspaces } from "@/db/tables";

/** Memberships of a person that are in force, oldest first. */
export async function selectMemberships(db: Queryable, { userId }: { userId: string }) {
  return await db
    .select({
      workspaceId: memberships.workspaceId,
      workspaceName: workspaces.name,
      sample: workspaces.sample,
      roles: memberships.roles,
    })
    .from(memberships)
    .innerJoin(workspaces, eq(workspaces.id, memberships.workspaceId))
    .where(and(eq(memberships.userId, userId), isNull(memberships.disabledAt)))
    .orderBy(memberships.createdAt, memberships.workspaceId);
}

/** Roles of a person in a workspace, read under a row lock when `lock`, so that a decision sees the role as it is now. */
export async function selectRoles(
  db: Queryable,
  { workspaceId, userId, lock = false }: { workspaceId: string; userId: string; lock?: boolean },
) {
  const query = db
    .select({ roles: memberships.roles })
    .from(memberships)
    .where(
      and(
        eq(memberships.workspaceId, workspaceId),
        eq(memberships.userId, userId),
        isNull(memberships.disabledAt),
      ),
    );
  const [row] = lock ? await query.for("share") : await query;
  return row?.roles ?? null;
}

/** How many other active people of the workspace hold the role. */
export async function countOthersWithRole(
  db: Queryable,
  { workspaceId, userId, role }: { workspaceId: string; userId: string; role: "lead" | "admin" | "tester" },
): Promise<number> {
  const [row] = await db
    .select({ n: count() })
    .from(memberships)
    .where(
      and(
        eq(memberships.workspaceId, workspaceId),
        ne(memberships.userId, userId),
        isNull(memberships.disabledAt),
        sql`${role} = any(${memberships.roles})`,
      ),
    );
  return row.n;
}

/** A session by the hash of its token: when it began and which workspace it looks at. */
export async function selectSession(db: Queryable, { tokenHash }: { tokenHash: string }) {
  const [row] = await db
    .select({
      userId: sessions.userId,
      activeWorkspaceId: sessions.activeWorkspaceId,
      createdAt: sessions.createdAt,
      ageS: sql<number>`extract(epoch from now() - ${sessions.createdAt})::float8`,
    })
    .from(sessions)
    .where(eq(sessions.sessionToken, tokenHash));
  return row ?? null;
}

export async function setActiveWorkspace(
  db: Queryable,
  { tokenHash, workspaceId }: { tokenHash: string; workspaceId: string },
): Promise<void> {
  await db
    .update(sessions)
    .set({ activeWorkspaceId: workspaceId })
    .where(eq(sessions.sessionToken, tokenHash));
}

/** Ends every session of a person. */
export async function deleteSessions(db: Queryable, { userId }: { userId: string }): Promise<void> {
  await db.delete(sessions).where(eq(sessions.userId, userId));
}

export async function selectUser(db: Queryable, { userId }: { userId: string }) {
  const [row] = await db
    .select({ id: users.id, name: users.name, email: users.email })
    .from(users)
    .where(eq(users.id, userId));
  return row ?? null;
}

export async function updateUserName(
  db: Queryable,
  { userId, name }: { userId: string; name: string },
): Promise<void> {
  await db.update(users).set({ name }).where(eq(users.id, userId));
}

/** The passphrase row of a person, locked for the length of the transaction when `lock`. */
export async function selectPassphrase(
  db: Queryable,
  { userId, lock = false }: { userId: string; lock?: boolean },
) {
  const query = db
    .select({
      scryptHash: signingPassphrases.scryptHash,
      failedTries: signingPassphrases.failedTries,
      locked: sql<boolean>`coalesce(${signingPassphrases.lockedUntil} > now(), false)`,
    })
    .from(signingPassphrases)
    .where(eq(signingPassphrases.userId, userId));
  const [row] = lock ? await query.for("update") : await query;
  return row ?? null;
}

/** Whether a person has set a signing passphrase. */
export async function hasPassphrase(db: Queryable, { userId }: { userId: string }): Promise<boolean> {
  const [row] = await db
    .select({ n: count() })
    .from(signingPassphrases)
    .where(eq(signingPassphrases.userId, userId));
  return row.n > 0;
}

export async function savePassphrase(
  tx: Queryable,
  { userId, scryptHash }: { userId: string; scryptHash: string },
) {
  const fresh = { scryptHash, failedTries: 0, lockedUntil: null, setAt: sql`now()` };
  await tx
    .insert(signingPassphrases)
    .values({ userId, scryptHash })
    .onConflictDoUpdate({ target: signingPassphrases.userId, set: fresh });
}

/** Counts a wrong try, or clears the count after a right one; the fifth wrong one locks for 15 minutes. */
export async function notePassphraseTry(
  tx: Queryable,
  { userId, right }: { userId: string; right: boolean },
) {
  await tx
    .update(signingPassphrases)
    .set(
      right
        ? { failedTries: 0, lockedUntil: null }
        : {
            failedTries: sql`case when ${signingPassphrases.failedTries} >= 4 then 0 else ${signingPassphrases.failedTries} + 1 end`,
            lockedUntil: sql`case when ${signingPassphrases.failedTries} >= 4 then now() + interval '15 minutes' end`,
          },
    )
    .where(eq(signingPassphrases.userId, userId));
}

/** Counts one try in a bucket and tells how many there were in the running window of one hour, this one included. */
export async function countTry(db: Queryable, { bucket }: { bucket: string }): Promise<number> {
  const [row] = await db
    .insert(rateLimits)
    .values({ bucket, count: 1 })
    .onConflictDoUpdate({
      target: rateLimits.bucket,
      set: {
        count: sql`case when ${rateLimits.windowStart} < now() - interval '1 hour' then 1 else ${rateLimits.count} + 1 end`,
        windowStart: sql`case when ${rateLimits.windowStart} < now() - interval '1 hour' then now() else ${rateLimits.windowStart} end`,
      },
    })
    .returning({ count: rateLimits.count });
  return row.count;
}

/** Demo people with the roles they hold in demo workspaces; one of them when named. */
export async function selectSamplePeople(db: Queryable, { userId }: { userId?: string } = {}) {
  return await db
    .select({ id: users.id, name: users.name, roles: memberships.roles })
    .from(users)
    .innerJoin(memberships, eq(memberships.userId, users.id))
    .innerJoin(workspaces, eq(workspaces.id, memberships.workspaceId))
    .where(
      and(
        eq(users.sample, true),
        eq(workspaces.sample, true),
        isNull(memberships.disabledAt),
        userId === undefined ? undefined : eq(users.id, userId),
      ),
    )
    .orderBy(users.createdAt, users.name);
}

/** Addresses to warn of an attempted misuse: the person, and the active leads and admins of their workspaces. */
export async function selectAddressesToWarn(
  db: Queryable,
  { userId }: { userId: string },
): Promise<string[]> {
  const own = db
    .select({ id: memberships.workspaceId })
    .from(memberships)
    .where(and(eq(memberships.userId, userId), isNull(memberships.disabledAt)));
  const rows = await db
    .selectDistinct({ email: users.email })
    .from(users)
    .leftJoin(memberships, and(eq(memberships.userId, users.id), isNull(memberships.disabledAt)))
    .where(
      or(
        eq(users.id, userId),
        and(
          inArray(memberships.workspaceId, own),
          sql`${memberships.roles} && array['lead','admin']::role[]`,
        ),
      ),
    );
  return rows.map((row) => row.email);
}
