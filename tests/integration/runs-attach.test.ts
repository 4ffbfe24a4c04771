import { and, eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { blobs, ledger, revisions, runs } from "@/db/tables";
import { confirmChecklist } from "@/lib/services/road-days/confirm-checklist";
import { createRoadDay } from "@/lib/services/road-days/create";
import { CHECKLIST } from "@/lib/services/road-days/schema";
import { attachRun } from "@/lib/services/runs/attach";
import { listRoadDayRuns } from "@/lib/services/runs/list";
import { attachRunSchema } from "@/lib/services/runs/schema";
import { setRunAside } from "@/lib/services/runs/set-aside";
import { createTestDatabase, test } from "@/tests/support/database";
import { createMember, createProgrammeRow, createRevisionRow } from "@/tests/support/factories";
import { hasPendingJob } from "@/tests/support/pending-job";
import { attachLog, createRoadSide, DAY, pullLog } from "@/tests/support/road-side";
import { createTestStore } from "@/tests/support/store";
import { sha256Of, uploadBytes } from "@/tests/support/upload-bytes";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

describe("attaching a run", () => {
  test("keeps the log, writes the ledger and asks for a verdict", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId } = side;
    const { runId, number } = await attachLog(side.tester, side, pullLog());
    expect(number).toBe(1);
    const [run] = await tx.select().from(runs).where(eq(runs.id, runId));
    const sha256 = sha256Of(pullLog());
    expect(run).toMatchObject({
      ...{ workspaceId, logSha256: sha256, logFileName: "pull.csv", state: "waiting", number: 1 },
      ...{ revisionId: side.r2, roadDayId: side.roadDayId, testerId: side.tester.userId },
      // Weather left out is the road day's.
      ...{ tempC: 19, pressureHpa: 1004, humidityPct: 52, driveOrder: 1, leg: "out", gear: 3 },
    });
    expect(
      await tx
        .select()
        .from(blobs)
        .where(and(eq(blobs.workspaceId, workspaceId), eq(blobs.sha256, sha256))),
    ).toHaveLength(1);
    const [entry] = await tx.select().from(ledger).where(eq(ledger.subjectId, runId));
    expect(entry).toMatchObject({
      event: "run.attached",
      actorId: side.tester.userId,
      programmeId: side.programmeId,
      data: { number: 1, sha256, revision: 2, leg: "out", driveOrder: 1, vehicleSheet: 1 },
    });
    expect(await hasPendingJob(tx, { name: "judge-run", data: { workspaceId, runId } })).toBe(true);
    expect(await listRoadDayRuns(side.tester, side.roadDayId)).toMatchObject({
      waiting: 1,
      runs: [{ id: runId, number: 1, verdict: "waiting", revisionNumber: 2, why: [], next: null }],
    });
  });

  test("counts runs through the workspace, over road days", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    await attachLog(side.tester, side, pullLog(1));
    const next = await createRoadDay(side.tester, {
      ...DAY,
      day: "2030-01-02",
      programmeId: side.programmeId,
    });
    const confirmed = CHECKLIST.map((line) => line.item);
    await confirmChecklist(side.tester, { roadDayId: next.id, confirmed });
    // Its place 1 is free: places belong to a road day, numbers to the workspace.
    const second = await attachLog(side.otherTester, side, pullLog(2), { roadDayId: next.id, driveOrder: 1 });
    expect(second.number).toBe(2);
  });

  test("gives the same run again for the same key, and refuses another request under it", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const uploadId = await uploadBytes(side.tester, "log", "a.csv", pullLog());
    const input = attachRunSchema.parse({
      ...{ uploadId, roadDayId: side.roadDayId, revisionId: side.r2 },
      ...{ kind: "pull", leg: "out", driveOrder: 1, gear: "3" },
    });
    const key = { idempotencyKey: "one-and-the-same" };
    const first = await attachRun(side.tester, input, key);
    expect(await attachRun(side.tester, input, key)).toEqual(first);
    await expect(attachRun(side.tester, { ...input, leg: "back" }, key)).rejects.toMatchObject({
      status: 422,
      code: "idempotency_key_reused",
    });
    expect(await tx.select().from(runs).where(eq(runs.workspaceId, side.workspaceId))).toHaveLength(1);
  });

  test("names the run that has the same log, until that one is set aside", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const first = await attachLog(side.tester, side, pullLog());
    const again = attachLog(side.tester, side, pullLog(), { driveOrder: 2 });
    await expect(again).rejects.toMatchObject({
      status: 409,
      code: "already_attached",
      message: "Already attached as run 1: pull.csv has the same fingerprint.",
      details: { number: 1, runId: first.runId },
    });
    await setRunAside(side.tester, { runId: first.runId, rowVersion: 1, reason: "wrong revision chosen" });
    expect(await attachLog(side.tester, side, pullLog())).toMatchObject({ number: 2 });
  });

  test("names the run that has the place, and the next free one", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    await attachLog(side.tester, side, pullLog(1), { driveOrder: 3 });
    const clash = attachLog(side.tester, side, pullLog(2), { driveOrder: 3 });
    await expect(clash).rejects.toMatchObject({
      status: 409,
      code: "place_taken",
      details: { number: 1, next: 4 },
    });
    expect(await tx.select().from(runs).where(eq(runs.workspaceId, side.workspaceId))).toHaveLength(1);
  });

  test("waits for the safety checklist, the whole of it", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    await confirmChecklist(side.tester, { roadDayId: side.roadDayId, confirmed: ["brakes", "tyres"] });
    await expect(attachLog(side.tester, side, pullLog())).rejects.toMatchObject({
      status: 409,
      code: "checklist_open",
      details: { open: expect.arrayContaining([expect.stringContaining("second person")]) },
    });
  });

  for (const state of ["draft", "superseded", "turned_down", "withdrawn", "rolled_back"] as const) {
    test(`is refused for a revision that is ${state}`, async ({ tx }) => {
      const side = await createRoadSide(tx, files.store);
      await tx.update(revisions).set({ state }).where(eq(revisions.id, side.r2));
      await expect(attachLog(side.tester, side, pullLog())).rejects.toMatchObject({
        status: 409,
        code: "wrong_state",
      });
    });
  }

  for (const state of ["validating", "in_review", "promoted"] as const) {
    test(`is possible for a revision that is ${state}`, async ({ tx }) => {
      const side = await createRoadSide(tx, files.store);
      await tx.update(revisions).set({ state: "superseded" }).where(eq(revisions.id, side.r1));
      await tx.update(revisions).set({ state }).where(eq(revisions.id, side.r2));
      expect(await attachLog(side.tester, side, pullLog())).toMatchObject({ number: 1 });
    });
  }

  test("is refused for a barred revision", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    await tx.update(revisions).set({ barredAt: new Date() }).where(eq(revisions.id, side.r2));
    await expect(attachLog(side.tester, side, pullLog())).rejects.toMatchObject({ code: "revision_barred" });
  });

  test("is refused for a revision of another programme", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const { workspaceId } = side;
    const authorId = side.calibrator.userId;
    const programmeId = await createProgrammeRow(tx, { workspaceId, createdBy: authorId });
    const owner = { workspaceId, programmeId, authorId };
    const stranger = await createRevisionRow(tx, { ...owner, number: 1, state: "validating" });
    await expect(attachLog(side.tester, side, pullLog(), { revisionId: stranger })).rejects.toMatchObject({
      status: 422,
      code: "other_programme",
    });
  });

  for (const role of ["reader", "calibrator", "lead", "admin"] as const) {
    test(`is not for a ${role}`, async ({ tx }) => {
      const side = await createRoadSide(tx, files.store);
      const member = await createMember(tx, {
        workspaceId: side.workspaceId,
        roles: [role],
        store: files.store,
      });
      const uploadId = await uploadBytes(side.tester, "log", "a.csv", pullLog());
      const input = attachRunSchema.parse({
        ...{ uploadId, roadDayId: side.roadDayId, revisionId: side.r2 },
        ...{ kind: "pull", leg: "out", driveOrder: 1, gear: 3 },
      });
      await expect(attachRun(member, input, { idempotencyKey: "some-key" })).rejects.toMatchObject({
        status: 403,
      });
      expect(await tx.select().from(runs).where(eq(runs.workspaceId, side.workspaceId))).toHaveLength(0);
    });
  }

  test("takes nobody else's upload", async ({ tx }) => {
    const side = await createRoadSide(tx, files.store);
    const uploadId = await uploadBytes(side.otherTester, "log", "a.csv", pullLog());
    const input = attachRunSchema.parse({
      ...{ uploadId, roadDayId: side.roadDayId, revisionId: side.r2 },
      ...{ kind: "pull", leg: "out", driveOrder: 1, gear: 3 },
    });
    const stolen = attachRun(side.tester, input, { idempotencyKey: "some-key" });
    await expect(stolen).rejects.toMatchObject({ status: 404, code: "no_upload" });
  });
});

test("two testers who attach at once get different numbers, and one of two wins a place or a log", async () => {
  const database = await createTestDatabase();
  try {
    const side = await createRoadSide(database.db, files.store);
    const outcomes = await Promise.allSettled([
      attachLog(side.tester, side, pullLog(1), { driveOrder: 1 }),
      attachLog(side.otherTester, side, pullLog(1), { driveOrder: 2 }),
      attachLog(side.tester, side, pullLog(2), { driveOrder: 3 }),
      attachLog(side.otherTester, side, pullLog(3), { driveOrder: 3 }),
    ]);
    const made = outcomes.flatMap((outcome) =>
      outcome.status === "fulfilled" ? [outcome.value.number] : [],
    );
    const refused = outcomes.flatMap((outcome) =>
      outcome.status === "rejected" ? [outcome.reason.code] : [],
    );
    expect(made.sort()).toEqual([1, 2]);
    expect(refused.sort()).toEqual(["already_attached", "place_taken"]);
  } finally {
    await database.drop();
  }
});
