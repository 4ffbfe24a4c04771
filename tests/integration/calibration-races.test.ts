import { randomUUID } from "node:crypto";
import { and, eq, sql } from "drizzle-orm";
import { Client } from "pg";
import { afterAll, beforeAll, describe, expect, vi } from "vitest";
import { savePassphrase } from "@/db/queries/people";
import { changeSets, gatePlans, imageChecks, imageReadings, programmes, revisions } from "@/db/tables";
import { READER_VERSION } from "@/lib/calibration/reader-version";
import { ConflictError } from "@/lib/errors";
import { renewOutdated } from "@/lib/jobs/renew-outdated";
import { sweepLeftovers } from "@/lib/jobs/sweep";
import { askForChangeSet } from "@/lib/services/change-sets/ask";
import { exportRevisionValues } from "@/lib/services/change-sets/export";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import { promoteRevision } from "@/lib/services/decisions/promote";
import { addDescription } from "@/lib/services/descriptions/add";
import {
  addSmallRevision,
  createCalibrationScene,
  doJobs,
  setState,
} from "@/tests/support/calibration-scene";
import { type TestDatabase, test } from "@/tests/support/database";
import { PASSPHRASE, seenBy } from "@/tests/support/decision-scene";
import { smallA2l } from "@/tests/support/small-calibration";
import { createTestStore } from "@/tests/support/store";
import { uploadBytes } from "@/tests/support/upload-bytes";

vi.mock("@/lib/auth/passphrase", () => ({
  passphraseFits: async (given: string, stored: string) => given === stored,
}));

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

async function asOwner({ ownerUrl }: TestDatabase, statements: string): Promise<void> {
  const client = new Client({ connectionString: ownerUrl });
  await client.connect();
  try {
    await client.query(statements);
  } finally {
    await client.end();
  }
}

describe("at the same moment", () => {
  test("a promotion and descriptions for both sides: each happens whole or is told, and every pair is opened", async ({
    database,
  }) => {
    const { db } = database;
    for (let trial = 0; trial < 6; trial += 1) {
      const scene = await createCalibrationScene(db, files.store);
      const { lead, calibrator, workspaceId, programmeId } = scene;
      await savePassphrase(db, { userId: lead.userId, scryptHash: PASSPHRASE });
      const plan = { plan: 1 as const, gates: [] };
      await db
        .insert(gatePlans)
        .values({ workspaceId, programmeId, version: 1, plan, createdBy: lead.userId });
      const [a, b, c] = [
        await addSmallRevision(scene, {}, { a2l: null }),
        await addSmallRevision(scene, { gain: 2 }, { a2l: null }),
        await addSmallRevision(scene, { gain: 3 }, { a2l: null }),
      ];
      await setState(scene, a, { state: "promoted", asFound: true, stoodFrom: new Date() });
      await db.update(programmes).set({ standingRevisionId: a }).where(eq(programmes.id, programmeId));
      await setState(scene, b, { state: "in_review", gatePlanVersion: 1 });
      const seen = await seenBy(lead, b);
      const describeIt = async (revisionId: string) => {
        const uploadIds = [await uploadBytes(calibrator, "description", `${revisionId}.a2l`, smallA2l())];
        return () => addDescription(calibrator, { revisionId, rowVersion: 1, uploadIds }, randomUUID());
      };
      const adding = [await describeIt(a), await describeIt(c)];
      const outcomes = await Promise.allSettled([promoteRevision(lead, seen), ...adding.map((add) => add())]);
      for (const outcome of outcomes)
        if (outcome.status === "rejected") expect(outcome.reason).toBeInstanceOf(ConflictError);
      await doJobs(scene);
      // Whoever was first: what stands now is set against the draft, by the descriptions that are there now.
      const [standing] = await db
        .select()
        .from(revisions)
        .where(and(eq(revisions.programmeId, programmeId), eq(revisions.state, "promoted")));
      const view = await getRevisionChanges(lead, c);
      expect(view).toMatchObject({ state: "ready", against: { id: standing.id } });
    }
  });

  test("two who ask for the same pair get one change set", async ({ database }) => {
    const scene = await createCalibrationScene(database.db, files.store);
    const a = await addSmallRevision(scene, {});
    const b = await addSmallRevision(scene, { gain: 2 });
    const ask = () => askForChangeSet(scene.tester, { revisionId: b, againstId: a });
    const ids = await Promise.all([ask(), ask(), ask(), ask()]);
    expect(new Set(ids.map(({ changeSetId }) => changeSetId)).size).toBe(1);
  });
});

describe("in the background", () => {
  test("what an older reader worked out is worked out anew beside it, once", async ({ database }) => {
    const { db } = database;
    const scene = await createCalibrationScene(db, files.store);
    const a = await addSmallRevision(scene, {});
    const b = await addSmallRevision(scene, { gain: 2 }, { parentId: a });
    await doJobs(scene);
    await db
      .update(changeSets)
      .set({ readerVersion: "0.9.0", inputSha256: "0".repeat(64) })
      .where(eq(changeSets.revisionBId, b));
    expect((await getRevisionChanges(scene.lead, b)).state).toBe("not_asked");
    expect(await renewOutdated(db)).toBe(1);
    expect(await renewOutdated(db)).toBe(0);
    await doJobs(scene);
    expect((await getRevisionChanges(scene.lead, b)).state).toBe("ready");
    const rows = await db.select().from(changeSets).where(eq(changeSets.revisionBId, b));
    expect(rows.map(({ readerVersion }) => readerVersion).sort()).toEqual(["0.9.0", READER_VERSION]);
  });

  test("readings of an older reader are made anew, and what waits without a job gets one", async ({
    database,
  }) => {
    const { db } = database;
    const scene = await createCalibrationScene(db, files.store);
    const a = await addSmallRevision(scene, {});
    const b = await addSmallRevision(scene, { gain: 2 }, { parentId: a });
    await doJobs(scene);
    const anHourAgo = sql`now() - interval '1 hour'`;
    await db.update(imageReadings).set({ readerVersion: "0.9.0" });
    expect(await renewOutdated(db)).toBe(2);
    expect(await renewOutdated(db)).toBe(0);
    await doJobs(scene);
    expect(await db.select().from(imageReadings)).toHaveLength(4);
    await db
      .update(changeSets)
      .set({ state: "computing", result: null, createdAt: anHourAgo })
      .where(eq(changeSets.revisionBId, b));
    expect(await renewOutdated(db)).toBe(1);
    await doJobs(scene);
    expect((await getRevisionChanges(scene.lead, b)).state).toBe("ready");
  });

  test("revisions from before there were change sets are checked and compared, after a while", async ({
    database,
  }) => {
    const { db } = database;
    const scene = await createCalibrationScene(db, files.store);
    const a = await addSmallRevision(scene, {}, { a2l: null });
    const b = await addSmallRevision(scene, { gain: 2 }, { a2l: null });
    await setState(scene, a, { state: "promoted", asFound: true });
    await db.update(programmes).set({ standingRevisionId: a }).where(eq(programmes.id, scene.programmeId));
    await doJobs(scene);
    await db.delete(imageChecks);
    expect(await renewOutdated(db)).toBe(0);
    // Only the owner of the tables may change when a revision was made.
    await asOwner(
      database,
      `alter table revisions disable trigger user; update revisions set created_at = now() - interval '1 hour'; alter table revisions enable trigger user`,
    );
    expect(await renewOutdated(db)).toBe(3);
    await doJobs(scene);
    expect(await getRevisionChanges(scene.lead, b)).toMatchObject({ state: "ready", integrity: [] });
    expect(await renewOutdated(db)).toBe(0);
    // A check by regions that do not count any more is none.
    await db.update(imageChecks).set({ regionsVersion: 7 });
    expect(await renewOutdated(db)).toBe(2);
  });

  test("the sweep leaves readings alone: they are kept like every other file", async ({ database }) => {
    const { db } = database;
    const scene = await createCalibrationScene(db, files.store);
    const revisionId = await addSmallRevision(scene, {});
    await doJobs(scene);
    const inAWeek = new Date(Date.now() + 7 * 24 * 3_600_000);
    const report = await sweepLeftovers({ db, store: files.store }, inAWeek);
    expect(report.rowWithoutObject).toEqual([]);
    const { pieces } = await exportRevisionValues(scene.lead, { revisionId, format: "csv" });
    expect([...pieces].join("")).toMatch(/rpm_limit.*6600/);
  });
});
