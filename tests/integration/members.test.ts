import { eq, sql } from "drizzle-orm";
import pino, { type Logger } from "pino";
import { describe, expect } from "vitest";
import type { Queryable } from "@/db/client";
import { selectMemberships, selectRoles } from "@/db/queries/people";
import { invitations, ledger, mailQueue, memberships, sessions, signingPassphrases } from "@/db/tables";
import { hashPassphrase } from "@/lib/auth/passphrase";
import { reauthenticate } from "@/lib/auth/reauthenticate";
import { ROLES, type Role } from "@/lib/policy/actor";
import { setPassphrase } from "@/lib/services/account/set-passphrase";
import type { Asker } from "@/lib/services/asker";
import type { Ctx } from "@/lib/services/ctx";
import { acceptInvitation, findInvitation } from "@/lib/services/members/accept";
import { changeRoles } from "@/lib/services/members/change-roles";
import { disableMember } from "@/lib/services/members/disable";
import { inviteMember, withdrawInvitation } from "@/lib/services/members/invite";
import { listMembers } from "@/lib/services/members/list";
import { createWorkspace } from "@/lib/services/workspaces/create";
import { switchWorkspace } from "@/lib/services/workspaces/switch";
import { test } from "@/tests/support/database";
import { createMember, createPerson, createWorkspaceRow } from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";

(globalThis as { twinpassLogger?: Logger }).twinpassLogger = pino({ level: "silent" });

const FRESH = { sessionAgeS: 10 };
const ORIGIN = "http://localhost:3061";

async function asker(db: Queryable, person?: { id: string; name: string; email: string }) {
  const { id, name, email } = person ?? (await createPerson(db));
  return { userId: id, userName: name, email, db, store: noStore } satisfies Asker & { email: string };
}

const member = (db: Queryable, workspaceId: string, roles: Role[]): Promise<Ctx> =>
  createMember(db, { workspaceId, roles, store: noStore });

/** The token in the newest invitation mail of an address. */
async function invited(db: Queryable, email: string): Promise<string> {
  const rows = await db.select().from(mailQueue).where(eq(mailQueue.toAddress, email));
  return /\/invitations\/([\w-]+)/.exec(rows.at(-1)?.body ?? "")?.[1] ?? "";
}

const events = async (db: Queryable, workspaceId: string) =>
  (await db.select().from(ledger).where(eq(ledger.workspaceId, workspaceId)).orderBy(ledger.seq)).map(
    (row) => row.event,
  );

describe("a new workspace", () => {
  test("gives its maker every role and begins its ledger", async ({ tx }) => {
    const me = await asker(tx);
    const { workspaceId } = await createWorkspace(me, { name: "  Shop on the hill " });
    expect(await selectRoles(tx, { workspaceId, userId: me.userId })).toEqual([...ROLES]);
    expect(await selectMemberships(tx, { userId: me.userId })).toMatchObject([
      { workspaceName: "Shop on the hill", sample: false },
    ]);
    expect(await events(tx, workspaceId)).toEqual(["workspace.created"]);
  });

  test("is refused without a name, and leaves nothing", async ({ tx }) => {
    const me = await asker(tx);
    await expect(createWorkspace(me, { name: "  " })).rejects.toThrow();
    expect(await selectMemberships(tx, { userId: me.userId })).toEqual([]);
  });

  test("can be looked at only by its members", async ({ tx }) => {
    const me = await asker(tx);
    await tx.insert(sessions).values({ sessionToken: "h", userId: me.userId, expires: new Date() });
    const { workspaceId } = await createWorkspace(me, { name: "Mine" });
    await switchWorkspace(me, "h", { workspaceId });
    const foreign = await createWorkspaceRow(tx);
    await expect(switchWorkspace(me, "h", { workspaceId: foreign })).rejects.toMatchObject({ status: 404 });
    expect(await tx.select().from(sessions)).toMatchObject([{ activeWorkspaceId: workspaceId }]);
  });
});

describe("an invitation", () => {
  test("lets the invited address in, once, with the roles it names", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const admin = await member(tx, workspaceId, ["admin"]);
    const guest = await asker(tx);
    const roles: Role[] = ["calibrator", "tester"];
    await inviteMember(admin, { email: ` ${guest.email.toUpperCase()} `, roles }, FRESH, ORIGIN);
    const token = await invited(tx, guest.email);
    expect(await findInvitation(tx, token)).toMatchObject({ workspaceId, roles: ["tester", "calibrator"] });
    const [row] = await tx.select().from(invitations);
    expect(row.tokenSha256).not.toBe(token);

    const stranger = await asker(tx);
    await expect(acceptInvitation(stranger, { token })).rejects.toMatchObject({ status: 403 });
    await acceptInvitation(guest, { token });
    expect(await selectRoles(tx, { workspaceId, userId: guest.userId })).toEqual(["tester", "calibrator"]);
    await expect(acceptInvitation(guest, { token })).rejects.toMatchObject({ status: 404 });
    expect(await events(tx, workspaceId)).toEqual(["member.invited", "member.joined"]);
  });

  test("keeps addresses out of the ledger", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const admin = await member(tx, workspaceId, ["admin"]);
    await inviteMember(admin, { email: "who@example.org", roles: ["reader"] }, FRESH, ORIGIN);
    const rows = await tx.select().from(ledger).where(eq(ledger.workspaceId, workspaceId));
    expect(JSON.stringify(rows)).not.toContain("example.org");
  });

  test("runs out after seven days, and an earlier one ends with the next", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const admin = await member(tx, workspaceId, ["admin"]);
    const guest = await asker(tx);
    const invite = () => inviteMember(admin, { email: guest.email, roles: ["reader"] }, FRESH, ORIGIN);
    await invite();
    const first = await invited(tx, guest.email);
    const left = await tx.execute<{ days: number }>(
      sql`select extract(epoch from expires_at - now())::float8 / 86400 as days from invitations`,
    );
    expect(left.rows[0].days).toBeCloseTo(7, 3);
    await tx.execute(sql`update mail_queue set created_at = created_at - interval '1 minute'`);
    const { invitationId } = await invite();
    expect(await findInvitation(tx, first)).toBeNull();
    await withdrawInvitation(admin, invitationId);
    await expect(withdrawInvitation(admin, invitationId)).rejects.toMatchObject({ status: 404 });
    expect((await listMembers(admin)).invitations).toEqual([]);
  });

  test("is not for somebody who is or was a member", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const admin = await member(tx, workspaceId, ["admin"]);
    const guest = await asker(tx);
    const invite = () => inviteMember(admin, { email: guest.email, roles: ["reader"] }, FRESH, ORIGIN);
    await invite();
    await acceptInvitation(guest, { token: await invited(tx, guest.email) });
    await expect(invite()).rejects.toMatchObject({ status: 409, code: "is_member" });
    await disableMember(admin, { userId: guest.userId }, FRESH);
    await expect(invite()).rejects.toMatchObject({ status: 409, code: "was_member" });
  });
});

describe("roles", () => {
  test("are not one's own to change while another admin is there", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const one = await member(tx, workspaceId, ["admin"]);
    await changeRoles(one, { userId: one.userId, roles: ["admin", "lead"] }, FRESH);
    const two = await member(tx, workspaceId, ["admin", "tester"]);
    const own = changeRoles(one, { userId: one.userId, roles: ["admin", "lead", "tester"] }, FRESH);
    await expect(own).rejects.toMatchObject({ code: "roles_kept" });
    await changeRoles(one, { userId: two.userId, roles: ["tester"] }, FRESH);
    expect(await selectRoles(tx, { workspaceId, userId: two.userId })).toEqual(["tester"]);
    expect(await events(tx, workspaceId)).toEqual(["member.role_changed", "member.role_changed"]);
  });

  test("of the last admin keep admin, and the last admin can't be disabled", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const admin = await member(tx, workspaceId, ["admin", "lead"]);
    await member(tx, workspaceId, ["lead"]);
    const demote = changeRoles(admin, { userId: admin.userId, roles: ["lead"] }, FRESH);
    await expect(demote).rejects.toMatchObject({ status: 409 });
    const disable = disableMember(admin, { userId: admin.userId }, FRESH);
    await expect(disable).rejects.toMatchObject({ status: 409 });
    expect(await selectRoles(tx, { workspaceId, userId: admin.userId })).toEqual(["admin", "lead"]);
  });

  for (const role of ["reader", "tester", "calibrator", "lead"] as const) {
    test(`of others are not for a ${role} to touch`, async ({ tx }) => {
      const workspaceId = await createWorkspaceRow(tx);
      const admin = await member(tx, workspaceId, ["admin"]);
      const ctx = await member(tx, workspaceId, [role]);
      const invite = { email: "x@example.org", roles: ["admin" as const] };
      const own = { userId: ctx.userId, roles: ["admin" as const] };
      for (const attempt of [
        () => inviteMember(ctx, invite, FRESH, ORIGIN),
        () => changeRoles(ctx, own, FRESH),
        () => disableMember(ctx, { userId: admin.userId }, FRESH),
      ])
        await expect(attempt()).rejects.toMatchObject({ status: 403 });
      expect(await selectRoles(tx, { workspaceId, userId: ctx.userId })).toEqual([role]);
    });
  }

  test("of another workspace's people do not exist here", async ({ tx }) => {
    const admin = await member(tx, await createWorkspaceRow(tx), ["admin"]);
    const other = await member(tx, await createWorkspaceRow(tx), ["tester"]);
    const change = changeRoles(admin, { userId: other.userId, roles: ["admin"] }, FRESH);
    await expect(change).rejects.toMatchObject({ status: 404 });
    await expect(disableMember(admin, { userId: other.userId }, FRESH)).rejects.toMatchObject({
      status: 404,
    });
  });

  test("always leave an admin, also when two disable each other at once", async ({ database: { db } }) => {
    for (let round = 0; round < 20; round += 1) {
      const workspaceId = await createWorkspaceRow(db);
      const [one, two] = [await member(db, workspaceId, ["admin"]), await member(db, workspaceId, ["admin"])];
      const outcomes = await Promise.allSettled([
        disableMember(one, { userId: two.userId }, FRESH),
        disableMember(two, { userId: one.userId }, FRESH),
      ]);
      expect(outcomes.filter((outcome) => outcome.status === "fulfilled")).toHaveLength(1);
      const rows = await db.select().from(memberships).where(eq(memberships.workspaceId, workspaceId));
      expect(rows.filter((row) => row.disabledAt === null)).toHaveLength(1);
    }
  });
});

describe("a disabled member", () => {
  test("has no session and no membership left, but keeps the row", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const admin = await member(tx, workspaceId, ["admin"]);
    const leaving = await member(tx, workspaceId, ["lead"]);
    const expires = new Date(Date.now() + 1e7);
    for (const sessionToken of ["one", "two"])
      await tx.insert(sessions).values({ sessionToken, userId: leaving.userId, expires });
    await disableMember(admin, { userId: leaving.userId }, FRESH);
    expect(await tx.select().from(sessions)).toEqual([]);
    expect(await selectMemberships(tx, { userId: leaving.userId })).toEqual([]);
    const rows = await tx.select().from(memberships).where(eq(memberships.userId, leaving.userId));
    expect(rows).toMatchObject([{ roles: ["lead"] }]);
    const again = changeRoles(admin, { userId: leaving.userId, roles: ["lead"] }, FRESH);
    await expect(again).rejects.toMatchObject({ code: "member_disabled" });
  });
});

describe("the list of members", () => {
  test("shows readers names only", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const admin = await member(tx, workspaceId, ["admin"]);
    const reader = await member(tx, workspaceId, ["reader"]);
    const seen = await listMembers(reader);
    expect(seen.members.map((line) => line.email)).toEqual([null, null]);
    expect(JSON.stringify(seen)).not.toContain("example.org");
    expect((await listMembers(admin)).members.every((line) => line.email?.includes("@"))).toBe(true);
  });
});

describe("identity before a change of people", () => {
  test("takes the passphrase once the sign-in is older than five minutes", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const admin = await member(tx, workspaceId, ["admin"]);
    const other = await member(tx, workspaceId, ["tester"]);
    const change = (proof: { sessionAgeS: number; passphrase?: string }) =>
      changeRoles(admin, { userId: other.userId, roles: ["lead"] }, proof);
    await expect(change({ sessionAgeS: 301 })).rejects.toMatchObject({ code: "identity_not_confirmed" });
    const scryptHash = await hashPassphrase("four unrelated words do");
    await tx.insert(signingPassphrases).values({ userId: admin.userId, scryptHash });
    const wrong = change({ sessionAgeS: 301, passphrase: "something else" });
    await expect(wrong).rejects.toMatchObject({ code: "wrong_passphrase" });
    await change({ sessionAgeS: 301, passphrase: "four unrelated words do" });
    expect(await selectRoles(tx, { workspaceId, userId: other.userId })).toEqual(["lead"]);
  });
});

describe("the signing passphrase", () => {
  const FIRST = { fresh: "four unrelated words do", again: "four unrelated words do" };
  const SECOND = { fresh: "another four plain words", again: "another four plain words" };

  test("is set right after signing in, later only with the old one", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const me = await member(tx, workspaceId, ["lead"]);
    await expect(setPassphrase(me, FIRST, 301)).rejects.toMatchObject({ status: 403 });
    await setPassphrase(me, FIRST, 299);
    await expect(setPassphrase(me, SECOND, 301)).rejects.toMatchObject({ status: 403 });
    const wrong = setPassphrase(me, { ...SECOND, old: "not that one" }, 301);
    await expect(wrong).rejects.toMatchObject({ code: "wrong_passphrase" });
    await setPassphrase(me, { ...SECOND, old: FIRST.fresh }, 301);
    expect(await reauthenticate(me, SECOND.fresh)).toBe("passphrase");
    await expect(reauthenticate(me, FIRST.fresh)).rejects.toMatchObject({ code: "wrong_passphrase" });
    expect(await events(tx, workspaceId)).toEqual(["passphrase.set", "passphrase.set"]);
    const told = await tx.select().from(mailQueue);
    expect(told.map((mail) => mail.subject)).toEqual([
      "Your signing passphrase for Twinpass was set",
      "Your signing passphrase for Twinpass was changed",
    ]);
  });

  test("has at least twelve characters, written twice alike, and is kept as a hash", async ({ tx }) => {
    const me = await member(tx, await createWorkspaceRow(tx), ["lead"]);
    const short = { fresh: "elevenchars", again: "elevenchars" };
    await expect(setPassphrase(me, short, 1)).rejects.toThrow();
    await expect(setPassphrase(me, { ...FIRST, again: "four unrelated words" }, 1)).rejects.toThrow();
    expect(await tx.select().from(signingPassphrases)).toEqual([]);
    await setPassphrase(me, FIRST, 1);
    const [row] = await tx.select().from(signingPassphrases);
    expect(row.scryptHash).toMatch(/^scrypt\$[\w-]{22}\$[\w-]{43}$/);
  });

  test("locks after five wrong tries for a quarter of an hour and warns by mail", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const me = await member(tx, workspaceId, ["lead"]);
    for (const roles of [["admin"], ["lead"], ["tester"]] as Role[][]) await member(tx, workspaceId, roles);
    const scryptHash = await hashPassphrase(FIRST.fresh);
    await tx.insert(signingPassphrases).values({ userId: me.userId, scryptHash });
    for (let nth = 1; nth <= 5; nth += 1)
      await expect(reauthenticate(me, "wrong")).rejects.toMatchObject({ code: "wrong_passphrase" });
    await expect(reauthenticate(me, FIRST.fresh)).rejects.toMatchObject({ status: 429 });
    // The person themself, the admin and the other lead; not the tester.
    expect(await tx.select().from(mailQueue)).toHaveLength(3);
    await tx.execute(
      sql`update signing_passphrases set locked_until = locked_until - interval '15 minutes 1 second'`,
    );
    expect(await reauthenticate(me, FIRST.fresh)).toBe("passphrase");
  });
});
