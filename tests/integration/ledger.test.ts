import { randomUUID } from "node:crypto";
import { sql } from "drizzle-orm";
import { Client } from "pg";
import { describe, expect } from "vitest";
import type { Queryable } from "@/db/client";
import { selectLedgerHead, selectLedgerStretch } from "@/db/queries/ledger";
import { ledger } from "@/db/tables";
import type { Role } from "@/lib/policy/actor";
import { type Ctx, withTransaction } from "@/lib/services/ctx";
import { appendLedger } from "@/lib/services/ledger/append";
import { firstBrokenLink } from "@/lib/services/ledger/entry";
import { readLedger } from "@/lib/services/ledger/read";
import { test } from "@/tests/support/database";
import { createMember, createProgrammeRow, createWorkspaceRow } from "@/tests/support/factories";
import { noStore } from "@/tests/support/no-store";

const member = (db: Queryable, workspaceId: string, ...roles: Role[]) =>
  createMember(db, { workspaceId, roles, store: noStore });

const write = (ctx: Ctx, nth: number, programmeId?: string) =>
  withTransaction(ctx, (tx, inner) =>
    appendLedger(tx, inner, {
      event: "test.happened",
      subjectType: "workspace",
      subjectId: ctx.workspaceId,
      programmeId,
      data: { nth, umlaut: "Straße", nested: { b: 2, a: [1.5, null] }, left: undefined },
    }),
  );

async function shop(db: Queryable) {
  const workspaceId = await createWorkspaceRow(db);
  return { workspaceId, lead: await member(db, workspaceId, "lead") };
}

const whole = (db: Queryable, workspaceId: string) =>
  selectLedgerStretch(db, { workspaceId, fromSeq: 1, toSeq: 1e9 });

describe("the chain", () => {
  test("is gap-free and unbroken after a hundred writes at once", async ({ database: { db } }) => {
    const { workspaceId, lead } = await shop(db);
    await Promise.all(Array.from({ length: 100 }, (_, nth) => write(lead, nth)));
    const rows = await whole(db, workspaceId);
    expect(rows.map((row) => row.seq)).toEqual(Array.from({ length: 100 }, (_, index) => index + 1));
    expect(firstBrokenLink(rows)).toBeNull();
    expect(rows[0].previousSha256).toBe("0".repeat(64));
    expect(await selectLedgerHead(db, { workspaceId })).toEqual({ seq: 100, sha256: rows[99].sha256 });
    const times = rows.map((row) => row.at.getTime());
    expect(times).toEqual([...times].sort((a, b) => a - b));
  });

  test("loses nothing and gains nothing when the change around an entry fails", async ({
    database: { db },
  }) => {
    const { workspaceId, lead } = await shop(db);
    await write(lead, 1);
    const failing = withTransaction(lead, async (tx, inner) => {
      await appendLedger(tx, inner, { event: "x", subjectType: "workspace", subjectId: null, data: {} });
      throw new Error("the change fails after its entry");
    });
    await expect(failing).rejects.toThrow("the change fails");
    await write(lead, 2);
    const rows = await whole(db, workspaceId);
    expect(rows.map((row) => [row.seq, row.event])).toEqual([
      [1, "test.happened"],
      [2, "test.happened"],
    ]);
    expect(firstBrokenLink(rows)).toBeNull();
  });

  test("of one workspace does not wait for that of another", async ({ database: { db } }) => {
    const [one, two] = [await shop(db), await shop(db)];
    await write(one.lead, 1);
    await withTransaction(one.lead, async (tx, inner) => {
      await appendLedger(tx, inner, { event: "slow", subjectType: "workspace", subjectId: null, data: {} });
      await write(two.lead, 1);
    });
    expect(await whole(db, two.workspaceId)).toHaveLength(1);
  });
});

describe("the runtime role", () => {
  // 42501 is insufficient_privilege in the table of PostgreSQL's error codes (appendix A of its manual).
  for (const change of [
    "update ledger set actor_name = 'nobody'",
    "delete from ledger",
    "truncate ledger",
    "truncate ledger, ledger_heads cascade",
    "alter table ledger disable trigger all",
  ]) {
    test(`may not ${change}`, async ({ tx }) => {
      const { lead } = await shop(tx);
      await write(lead, 1);
      const attempt = tx.transaction((nested) => nested.execute(sql.raw(change)));
      await expect(attempt).rejects.toMatchObject({ cause: { code: "42501" } });
      expect(await tx.select().from(ledger)).toHaveLength(1);
    });
  }
});

/** Changes the ledger as the owner of the tables with the guard switched off: what only such a person could do. */
async function tamper(ownerUrl: string, statement: string) {
  const owner = new Client({ connectionString: ownerUrl });
  await owner.connect();
  try {
    await owner.query("alter table ledger disable trigger user");
    await owner.query(statement);
    await owner.query("alter table ledger enable trigger user");
  } finally {
    await owner.end();
  }
}

describe("tampering by the owner of the tables", () => {
  for (const [what, statement, atSeq] of [
    ["a changed name", "update ledger set actor_name = 'somebody else' where seq = 3", 3],
    ["changed data", "update ledger set data = '{\"nth\": 99}' where seq = 2", 2],
    ["a changed time", "update ledger set at = at + interval '1 ms' where seq = 4", 4],
    ["an entry taken out of the middle", "delete from ledger where seq = 3", 4],
    ["the newest entry taken away", "delete from ledger where seq = 5", 4],
    ["the first entry taken away", "delete from ledger where seq = 1", 2],
  ] as const) {
    test(`shows: ${what}`, async ({ database: { db, ownerUrl } }) => {
      const { lead } = await shop(db);
      for (let nth = 1; nth <= 5; nth += 1) await write(lead, nth);
      expect((await readLedger(lead, {})).chain).toEqual({
        ...{ state: "holds", fromSeq: 1, toSeq: 5, reachesHead: true },
      });
      await tamper(ownerUrl, statement);
      expect((await readLedger(lead, {})).chain).toMatchObject({ state: "broken", atSeq });
    });
  }
});

describe("reading", () => {
  test("goes back page by page without a gap or a repeat, also while new entries come", async ({ tx }) => {
    const { lead } = await shop(tx);
    for (let nth = 1; nth <= 120; nth += 1) await write(lead, nth);
    const seen: number[] = [];
    let beforeSeq: number | undefined;
    do {
      const page = await readLedger(lead, { beforeSeq });
      seen.push(...page.entries.map((entry) => entry.seq));
      expect(page.chain.state).toBe("holds");
      beforeSeq = page.nextBeforeSeq ?? undefined;
      await write(lead, 0);
    } while (beforeSeq !== undefined);
    expect(seen).toEqual(Array.from({ length: 120 }, (_, index) => 120 - index));
  });

  test("filters by programme and still checks the stretch around", async ({ tx }) => {
    const { workspaceId, lead } = await shop(tx);
    const made = { workspaceId, createdBy: lead.userId };
    const [a, b] = [await createProgrammeRow(tx, made), await createProgrammeRow(tx, made)];
    for (let nth = 1; nth <= 9; nth += 1) await write(lead, nth, nth % 3 === 0 ? a : b);
    const page = await readLedger(lead, { programmeId: a });
    expect(page.entries.map((entry) => entry.seq)).toEqual([9, 6, 3]);
    expect(page.chain).toMatchObject({ state: "holds", fromSeq: 3, toSeq: 9, reachesHead: true });
  });

  test("is for leads and admins", async ({ tx }) => {
    const { workspaceId } = await shop(tx);
    for (const role of ["reader", "tester", "calibrator"] as const) {
      const ctx = await member(tx, workspaceId, role);
      await expect(readLedger(ctx, {})).rejects.toMatchObject({ status: 403 });
    }
    expect((await readLedger(await member(tx, workspaceId, "admin"), {})).chain).toEqual({ state: "empty" });
  });

  test("never reaches into another workspace", async ({ tx }) => {
    const [mine, theirs] = [await shop(tx), await shop(tx)];
    await write(theirs.lead, 1);
    const made = { workspaceId: theirs.workspaceId, createdBy: theirs.lead.userId };
    const programmeId = await createProgrammeRow(tx, made);
    expect((await readLedger(mine.lead, {})).entries).toEqual([]);
    for (const id of [programmeId, randomUUID()])
      await expect(readLedger(mine.lead, { programmeId: id })).rejects.toMatchObject({ status: 404 });
  });
});
