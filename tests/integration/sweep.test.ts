import { randomUUID } from "node:crypto";
import { utimesSync } from "node:fs";
import { join } from "node:path";
import { eq, sql } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { blobs, rateLimits, runs, uploads } from "@/db/tables";
import { sweepLeftovers } from "@/lib/jobs/sweep";
import { blobKey, parseStagingKey, prefixOf } from "@/storage/keys";
import { test } from "@/tests/support/database";
import { hasPendingJob } from "@/tests/support/pending-job";
import { attachLog, createRoadSide, pullLog } from "@/tests/support/road-side";
import { createTestStore } from "@/tests/support/store";
import { sha256Of, uploadBytes } from "@/tests/support/upload-bytes";

const HOUR_MS = 3_600_000;

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

/** Makes a stored object look as old as told. */
const age = (key: string, hours: number) => {
  const then = new Date(Date.now() - hours * HOUR_MS);
  utimesSync(join(files.root, key), then, then);
};

/** Stores bytes under their fingerprint, without a row. */
async function keep(workspaceId: string, bytes: Buffer) {
  const key = blobKey(workspaceId, sha256Of(bytes));
  async function* source() {
    yield bytes;
  }
  await files.store.create(key, source(), { sizeBytes: bytes.length });
  return key;
}

describe("the hourly sweep", () => {
  test("forgets counts of tries whose hour is over", async ({ tx }) => {
    const windowStart = sql`now() - interval '61 minutes'`;
    await tx.insert(rateLimits).values([
      { bucket: "link:old@example.org", count: 5, windowStart },
      { bucket: "link:new@example.org", count: 5 },
    ]);
    await sweepLeftovers({ db: tx, store: files.store });
    expect(await tx.select().from(rateLimits)).toMatchObject([{ bucket: "link:new@example.org" }]);
  });

  test("ends uploads nobody finished and clears their parts by age", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const uploadId = await uploadBytes(side.tester, "log", "left.csv", pullLog(1));
    const [row] = await tx.select().from(uploads).where(eq(uploads.id, uploadId));
    const prefix = prefixOf(parseStagingKey(row?.stagingKey ?? ""));
    await sweepLeftovers({ db: tx, store: files.store });
    expect((await files.store.list(prefix)).objects).toHaveLength(1);

    await tx
      .update(uploads)
      .set({ expiresAt: sql`now() - interval '1 minute'` })
      .where(eq(uploads.id, uploadId));
    for (const { key } of (await files.store.list(prefix)).objects) age(key, 25);
    const report = await sweepLeftovers({ db: tx, store: files.store });
    expect(report.stagingRemoved).toBe(1);
    expect((await files.store.list(prefix)).objects).toEqual([]);
    const [ended] = await tx.select().from(uploads).where(eq(uploads.id, uploadId));
    expect(ended?.state).toBe("cancelled");
  });

  test("removes an old file without a row, but none that an upload under way relies on", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId } = side;
    const orphan = await keep(workspaceId, Buffer.from("nobody knows me"));
    const relied = await keep(workspaceId, pullLog(2));
    for (const key of [orphan, relied]) age(key, 49);
    await uploadBytes(side.tester, "log", "again.csv", pullLog(2));
    const report = await sweepLeftovers({ db: tx, store: files.store });
    expect(report.orphansRemoved).toBe(1);
    await expect(files.store.stat(orphan)).rejects.toMatchObject({ code: "object_not_found" });
    expect((await files.store.stat(relied)).sizeBytes).toBe(pullLog(2).length);
  });

  test("reports a row whose file is gone, and touches nothing", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId } = side;
    await attachLog(side.tester, side, pullLog(3));
    const sha256 = sha256Of(pullLog(3));
    await files.store.remove(blobKey(workspaceId, sha256));
    const report = await sweepLeftovers({ db: tx, store: files.store });
    expect(report.rowWithoutObject).toContainEqual({ workspaceId, sha256, sizeBytes: pullLog(3).length });
    expect(await tx.select().from(blobs).where(eq(blobs.sha256, sha256))).toHaveLength(1);
  });

  test("asks for the verdict of a run that has long waited without a job", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId } = side;
    const { runId } = await attachLog(side.tester, side, pullLog(4));
    const [young] = await tx.select().from(runs).where(eq(runs.id, runId));
    const createdAt = new Date(Date.now() - 11 * 60_000);
    const old = { id: randomUUID(), number: 99, driveOrder: 99, setAsideAt: createdAt, createdAt };
    if (young) await tx.insert(runs).values({ ...young, ...old });
    await tx.execute("delete from pgboss.job");
    await sweepLeftovers({ db: tx, store: files.store });
    const jobOf = (id: string) => ({ name: "judge-run" as const, data: { workspaceId, runId: id } });
    expect(await hasPendingJob(tx, jobOf(old.id))).toBe(true);
    expect(await hasPendingJob(tx, jobOf(runId))).toBe(false);
  });
});
