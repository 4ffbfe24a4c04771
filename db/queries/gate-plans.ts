import { and, desc, eq } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { gatePlans, users } from "@/db/tables";
import type { GatePlan } from "@/lib/gates/plan";

interface Place {
  workspaceId: string;
  programmeId: string;
}

/** One version of a gate plan; the newest when none is named. */
export async function selectGatePlan(
  db: Queryable,
  { workspaceId, programmeId, version }: Place & { version?: number },
) {
  const [row] = await db
    .select({
      version: gatePlans.version,
      plan: gatePlans.plan,
      createdAt: gatePlans.createdAt,
      createdByName: users.name,
    })
    .from(gatePlans)
    .innerJoin(users, eq(users.id, gatePlans.createdBy))
    .where(
      and(
        eq(gatePlans.workspaceId, workspaceId),
        eq(gatePlans.programmeId, programmeId),
        version === undefined ? undefined : eq(gatePlans.version, version),
      ),
    )
    .orderBy(desc(gatePlans.version))
    .limit(1);
  return row ?? null;
}

/** Versions of a gate plan, newest first, without their gates. */
export async function selectGatePlanVersions(db: Queryable, { workspaceId, programmeId }: Place) {
  return await db
    .select({
      version: gatePlans.version,
      createdAt: gatePlans.createdAt,
      createdByName: users.name,
    })
    .from(gatePlans)
    .innerJoin(users, eq(users.id, gatePlans.createdBy))
    .where(and(eq(gatePlans.workspaceId, workspaceId), eq(gatePlans.programmeId, programmeId)))
    .orderBy(desc(gatePlans.version));
}

/** Adds a version. @returns false when somebody else has just added it */
export async function insertGatePlan(
  tx: Queryable,
  values: Place & { version: number; plan: GatePlan; createdBy: string },
): Promise<boolean> {
  const made = await tx
    .insert(gatePlans)
    .values(values)
    .onConflictDoNothing({ target: [gatePlans.programmeId, gatePlans.version] })
    .returning({ version: gatePlans.version });
  return made.length > 0;
}
