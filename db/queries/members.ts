import { and, asc, eq, gt, isNull, sql } from "drizzle-orm";
import type { Queryable } from "@/db/client";
import { invitations, memberships, users, workspaces } from "@/db/tables";
import type { Role } from "@/lib/policy/actor";

interface MemberKey {
  workspaceId: string;
  userId: string;
}

/** Takes the workspace's lock: changes of its members follow one another. Rows that only name the workspace may still be added. */
export async function lockWorkspace(tx: Queryable, { workspaceId }: { workspaceId: string }): Promise<void> {
  await tx
    .select({ id: workspaces.id })
    .from(workspaces)
    .where(eq(workspaces.id, workspaceId))
    .for("no key update");
}

/** Members by name, disabled ones too. */
export async function selectMembers(db: Queryable, { workspaceId }: { workspaceId: string }) {
  return await db
    .select({
      userId: memberships.userId,
      name: users.name,
      email: users.email,
      roles: memberships.roles,
      disabledAt: memberships.disabledAt,
      createdAt: memberships.createdAt,
    })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(eq(memberships.workspaceId, workspaceId))
    .orderBy(asc(users.name), asc(memberships.userId));
}

export async function selectMember(db: Queryable, { workspaceId, userId }: MemberKey) {
  const [row] = await db
    .select({ name: users.name, roles: memberships.roles, disabledAt: memberships.disabledAt })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(memberships.workspaceId, workspaceId), eq(memberships.userId, userId)));
  return row ?? null;
}

/** The membership of whoever has this address, if any. */
export async function selectMemberByEmail(
  db: Queryable,
  { workspaceId, email }: { workspaceId: string; email: string },
) {
  const [row] = await db
    .select({ userId: memberships.userId, disabledAt: memberships.disabledAt })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(memberships.workspaceId, workspaceId), eq(sql`lower(${users.email})`, email)));
  return row ?? null;
}

export async function insertMembership(tx: Queryable, values: MemberKey & { roles: Role[] }): Promise<void> {
  await tx.insert(memberships).values(values);
}

export async function updateRoles(
  tx: Queryable,
  { workspaceId, userId, roles }: MemberKey & { roles: Role[] },
): Promise<void> {
  await tx
    .update(memberships)
    .set({ roles })
    .where(and(eq(memberships.workspaceId, workspaceId), eq(memberships.userId, userId)));
}

export async function disableMembership(tx: Queryable, { workspaceId, userId }: MemberKey): Promise<void> {
  await tx
    .update(memberships)
    .set({ disabledAt: sql`now()` })
    .where(and(eq(memberships.workspaceId, workspaceId), eq(memberships.userId, userId)));
}

const isOpen = () => and(isNull(invitations.acceptedAt), gt(invitations.expiresAt, sql`now()`));

/** A new invitation, good for seven days by the database's clock. */
export async function insertInvitation(
  tx: Queryable,
  values: { workspaceId: string; email: string; roles: Role[]; tokenSha256: string; invitedBy: string },
) {
  const [row] = await tx
    .insert(invitations)
    .values({ ...values, expiresAt: sql`now() + interval '7 days'` })
    .returning({ id: invitations.id, expiresAt: invitations.expiresAt });
  return row;
}

/** Ends open invitations: those of an address, or one by its id. @returns the ids that were ended */
export async function endInvitations(
  tx: Queryable,
  args: { workspaceId: string; email?: string; invitationId?: string },
): Promise<string[]> {
  const ended = await tx
    .update(invitations)
    .set({ expiresAt: sql`now() - interval '1 second'` })
    .where(
      and(
        eq(invitations.workspaceId, args.workspaceId),
        args.email === undefined ? undefined : eq(invitations.email, args.email),
        args.invitationId === undefined ? undefined : eq(invitations.id, args.invitationId),
        isOpen(),
      ),
    )
    .returning({ id: invitations.id });
  return ended.map((row) => row.id);
}

export async function selectOpenInvitations(db: Queryable, { workspaceId }: { workspaceId: string }) {
  return await db
    .select({
      id: invitations.id,
      email: invitations.email,
      roles: invitations.roles,
      expiresAt: invitations.expiresAt,
    })
    .from(invitations)
    .where(and(eq(invitations.workspaceId, workspaceId), isOpen()))
    .orderBy(asc(invitations.email));
}

/** The open invitation that a token opens; its row locked when `lock`, so that it is used once. */
export async function selectInvitation(
  db: Queryable,
  { tokenSha256, lock = false }: { tokenSha256: string; lock?: boolean },
) {
  const query = db
    .select({
      id: invitations.id,
      workspaceId: invitations.workspaceId,
      workspaceName: workspaces.name,
      email: invitations.email,
      roles: invitations.roles,
      expiresAt: invitations.expiresAt,
      invitedByName: users.name,
    })
    .from(invitations)
    .innerJoin(workspaces, eq(workspaces.id, invitations.workspaceId))
    .innerJoin(users, eq(users.id, invitations.invitedBy))
    .where(and(eq(invitations.tokenSha256, tokenSha256), isOpen()));
  const [row] = lock ? await query.for("update", { of: invitations }) : await query;
  return row ?? null;
}

export async function markInvitationAccepted(tx: Queryable, { id }: { id: string }): Promise<void> {
  await tx.update(invitations).set({ acceptedAt: sql`now()` }).where(eq(invitations.id, id));
}
