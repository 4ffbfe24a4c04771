import { sql } from "drizzle-orm";
import { describe, expect } from "vitest";
import type { Queryable } from "@/db/client";
import { mailQueue, rateLimits, uploads, workspaces } from "@/db/tables";
import { inviteMember } from "@/lib/services/members/invite";
import { openUpload } from "@/lib/services/uploads/begin";
import { cancelUpload } from "@/lib/services/uploads/cancel";
import { LARGEST_BYTES } from "@/lib/services/uploads/schema";
import { createWorkspace } from "@/lib/services/workspaces/create";
import { test } from "@/tests/support/database";
import { createMember, createWorkspaceRow } from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";

const REFUSED = { status: 429, code: "too_many_tries" };
const LOG = { purpose: "log" as const, fileName: "a.csv", sizeBytes: 10, sha256: "0".repeat(64) };

/** Lets a limit be nearly used up. */
const setCounts = (db: Queryable, count: number) => db.update(rateLimits).set({ count });

describe("an hour of one person", () => {
  test("holds 600 uploads, and a colleague has their own", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const tester = await createMember(tx, { workspaceId, roles: ["tester"], store: noStore });
    const colleague = await createMember(tx, { workspaceId, roles: ["tester"], store: noStore });
    await openUpload(tester, LOG);
    await setCounts(tx, 599);
    await openUpload(tester, LOG);
    await expect(openUpload(tester, LOG)).rejects.toMatchObject(REFUSED);
    await expect(openUpload(tester, LOG)).rejects.toThrow("begin uploads at most 600 times an hour");
    await openUpload(colleague, LOG);
    expect(await tx.select().from(uploads)).toHaveLength(3);
    await tx.update(rateLimits).set({ windowStart: sql`now() - interval '61 minutes'` });
    await openUpload(tester, LOG);
  });

  test("holds 30 invitations", async ({ tx }) => {
    const workspaceId = await createWorkspaceRow(tx);
    const admin = await createMember(tx, { workspaceId, roles: ["admin"], store: noStore });
    const invite = (nth: number) =>
      inviteMember(
        admin,
        { email: `${nth}@example.org`, roles: ["reader"] },
        { sessionAgeS: 1 },
        "https://twinpass.example",
      );
    for (let nth = 1; nth <= 30; nth += 1) await invite(nth);
    await expect(invite(31)).rejects.toMatchObject(REFUSED);
    expect(await tx.select().from(mailQueue)).toHaveLength(30);
  });

  test("holds five new workspaces", async ({ tx }) => {
    const home = await createWorkspaceRow(tx);
    const me = await createMember(tx, { workspaceId: home, roles: ["admin"], store: noStore });
    for (let nth = 1; nth <= 5; nth += 1) await createWorkspace(me, { name: `Shop ${nth}` });
    await expect(createWorkspace(me, { name: "Shop 6" })).rejects.toMatchObject(REFUSED);
    expect(await tx.select().from(workspaces)).toHaveLength(6);
  });
});

describe("uploads under way", () => {
  test("are 4 GB a workspace at most, also when many begin at once", async ({ database: { db } }) => {
    const workspaceId = await createWorkspaceRow(db);
    const tester = await createMember(db, { workspaceId, roles: ["tester"], store: noStore });
    const other = await createMember(db, {
      workspaceId: await createWorkspaceRow(db),
      roles: ["tester"],
      store: noStore,
    });
    // 20 logs of 200 MB are 4 GB.
    const large = { ...LOG, sizeBytes: LARGEST_BYTES.log };
    const begun = await Promise.allSettled(Array.from({ length: 24 }, () => openUpload(tester, large)));
    expect(begun.filter((one) => one.status === "fulfilled")).toHaveLength(20);
    await expect(openUpload(tester, LOG)).rejects.toMatchObject({ status: 429, code: "too_much_under_way" });
    await openUpload(other, large);
    const first = begun.find((one) => one.status === "fulfilled");
    await cancelUpload(tester, first?.value.uploadId ?? "");
    await openUpload(tester, LOG);
  });
});
