import { sql } from "drizzle-orm";
import PgBoss from "pg-boss";
import { describe, expect } from "vitest";
import { workspaces } from "@/db/schema/workspaces";
import { test } from "@/tests/support/database";

describe("a test's transaction", () => {
  for (const round of [1, 2, 3]) {
    test(`starts without what the others wrote (${round})`, async ({ tx }) => {
      expect(await tx.select().from(workspaces)).toEqual([]);
      await tx.insert(workspaces).values({ name: "Same name each time" });
      expect(await tx.select().from(workspaces)).toHaveLength(1);
    });
  }

  test("goes on after a statement that failed inside a savepoint", async ({ tx }) => {
    const [first] = await tx.insert(workspaces).values({ name: "One" }).returning();
    const again = tx.transaction((nested) =>
      nested.insert(workspaces).values({ id: first?.id, name: "Two" }),
    );
    await expect(again).rejects.toThrow();
    expect(await tx.select().from(workspaces)).toHaveLength(1);
  });
});

describe("a test's own database", () => {
  test("keeps commits, is seen by other connections, and starts empty", async ({ database }) => {
    expect(await database.db.select().from(workspaces)).toEqual([]);
    await database.db.insert(workspaces).values({ name: "Kept" });
    const seen = await Promise.all([1, 2, 3].map(() => database.pool.query("select name from workspaces")));
    expect(seen.map((result) => result.rows)).toEqual(Array(3).fill([{ name: "Kept" }]));
  });
});

describe("the runtime role", () => {
  test("reads and writes ordinary tables and owns none", async ({ tx }) => {
    const owned = await tx.execute(sql`select from pg_tables where tableowner = current_user`);
    expect(owned.rowCount).toBe(0);
    const who = await tx.execute(sql`select current_user, session_user`);
    expect(who.rows).toEqual([{ current_user: "twinpass_app", session_user: "twinpass_app" }]);
  });

  // 42501 is insufficient_privilege in the table of PostgreSQL's error codes (appendix A of its manual).
  for (const table of [
    "ledger",
    "decisions",
    "waivers",
    "vehicle_sheets",
    "gate_plans",
    "channel_keys",
    "calibration_settings",
    "second_agreements",
  ]) {
    for (const change of [
      `update ${table} set workspace_id = null`,
      `delete from ${table}`,
      `truncate ${table}`,
    ]) {
      test(`may not ${change}`, async ({ tx }) => {
        const attempt = tx.execute(sql.raw(change));
        await expect(attempt).rejects.toMatchObject({ cause: { code: "42501" } });
      });
    }
  }

  for (const change of [
    "alter table ledger disable trigger all",
    "drop table runs",
    "create table public.x (a int)",
    "create table pgboss.x (a int)",
    "select pgboss.delete_queue('q')",
  ]) {
    test(`may not ${change}`, async ({ tx }) => {
      await expect(tx.execute(sql.raw(change))).rejects.toMatchObject({ cause: { code: "42501" } });
    });
  }

  test("makes a queue, sends a job and completes it", async ({ database }) => {
    const boss = new PgBoss({ connectionString: database.url, schedule: false });
    await boss.start();
    try {
      await boss.createQueue("analyse-run");
      await boss.send("analyse-run", { run: 7 });
      const [job] = await boss.fetch<{ run: number }>("analyse-run");
      expect(job?.data).toEqual({ run: 7 });
      await boss.complete("analyse-run", job?.id ?? "");
      expect((await boss.getJobById("analyse-run", job?.id ?? ""))?.state).toBe("completed");
    } finally {
      await boss.stop({ graceful: false });
    }
  });
});
