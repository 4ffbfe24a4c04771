import { randomUUID } from "node:crypto";
import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { changeSets, imageChecks, imageReadings, ledger, programmeShares, rateLimits } from "@/db/tables";
import { ConflictError, ForbiddenError, NotFoundError } from "@/lib/errors";
import { computeChangeSet } from "@/lib/jobs/calibration/compute-change-set";
import { readBlob } from "@/lib/services/blobs";
import { askForChangeSet } from "@/lib/services/change-sets/ask";
import { exportChangeSet, exportRevisionValues } from "@/lib/services/change-sets/export";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import { setLookedAt } from "@/lib/services/change-sets/looked-at";
import { getChangeSetState } from "@/lib/services/change-sets/state";
import {
  addSmallRevision,
  type CalibrationScene,
  createCalibrationScene,
  doJobs,
  setState,
} from "@/tests/support/calibration-scene";
import { test } from "@/tests/support/database";
import { AT, smallA2l } from "@/tests/support/small-calibration";
import { createTestStore } from "@/tests/support/store";
import { sha256Of } from "@/tests/support/upload-bytes";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

/** What stands, and a revision made from it: the limiter is raised, one point of the curve, and a byte that nobody described. */
async function twoRevisions(scene: CalibrationScene): Promise<{ before: string; after: string }> {
  const before = await addSmallRevision(scene, {});
  await setState(scene, before, { state: "promoted", asFound: true });
  const after = await addSmallRevision(
    scene,
    { limit: 7000, curve: [10, 20, 35, 40], spare: 1 },
    { parentId: before },
  );
  return { before, after };
}

describe("the changes of a revision", () => {
  test("are worked out when it comes in, in the units of its description", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { before, after } = await twoRevisions(scene);
    expect((await getRevisionChanges(scene.calibrator, after)).state).toBe("computing");
    await doJobs(scene);
    const view = await getRevisionChanges(scene.calibrator, after);
    expect(view).toMatchObject({
      state: "ready",
      against: { id: before, stands: true, isParent: true },
      fingerprintHolds: true,
      integrity: [],
      epk: { state: "match" },
      coverage: { state: "no_runs" },
      descriptions: { after: { state: "read", fileNames: ["small.a2l"] } },
    });
    // The raw words as written into the image, by the description's factors: 1 for the limiter, 0.1 for the curve.
    const found = view.changes?.characteristics.map(({ name, changes }) => [name, changes[0]]);
    expect(Object.fromEntries(found ?? [])).toMatchObject({
      rpm_limit: { index: [], before: 6600, after: 7000 },
      advance: { index: [2], before: 3, after: 3.5 },
    });
    expect(view.changes?.uncovered.map(({ address, length }) => [address, length])).toEqual([[AT.spare, 1]]);
    expect(await doJobs(scene)).toEqual([]);
  });

  test("are read by the other one's description where one has none, and by bytes where neither has", async ({
    tx,
  }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const bare = await addSmallRevision(scene, {}, { a2l: null });
    const described = await addSmallRevision(scene, { limit: 7000 }, { parentId: bare });
    const bareToo = await addSmallRevision(scene, { gain: 7 }, { parentId: bare, a2l: null });
    await doJobs(scene);
    expect((await getRevisionChanges(scene.calibrator, described)).changes).toMatchObject({
      readBy: "b",
      characteristics: [{ name: "rpm_limit" }],
    });
    const bytes = await getRevisionChanges(scene.calibrator, bareToo);
    expect(bytes.changes).toMatchObject({ readBy: "none", characteristics: [], changedRanges: 1 });
    expect(bytes.coverage.state).toBe("no_description");
    expect((await getRevisionChanges(scene.calibrator, bare)).state).toBe("nothing_to_compare");
  });

  test("say which description was refused, and compare the texts of two", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const before = await addSmallRevision(scene, {});
    const broken = await addSmallRevision(
      scene,
      { limit: 7000 },
      { parentId: before, a2l: Buffer.from("ASAP2_VERSION 1 71\n/begin PROJECT p") },
    );
    const reworded = await addSmallRevision(
      scene,
      { limit: 7000 },
      { parentId: before, a2l: smallA2l({ unit: "degrees" }) },
    );
    await doJobs(scene);
    const view = await getRevisionChanges(scene.calibrator, broken);
    expect(view.descriptions.after).toMatchObject({
      state: "refused",
      failure: expect.stringMatching(/small\.a2l/),
    });
    expect(view.changes?.readBy).toBe("a");
    expect(view.changes?.problems[0]).toMatch(/^The description of R2 is not used: /);
    const text = (await getRevisionChanges(scene.calibrator, reworded)).changes?.descriptionDifference;
    expect(text).toMatchObject({ added: 1, removed: 1 });
  });

  test("against any other are worked out when somebody asks, and by a POST only", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { before, after } = await twoRevisions(scene);
    await doJobs(scene);
    const backwards = { revisionId: before, againstId: after };
    const unasked = await getRevisionChanges(scene.tester, before, after);
    expect(unasked).toMatchObject({ state: "not_asked", changeSetId: null, changes: null });
    expect(
      await tx.select().from(changeSets).where(eq(changeSets.workspaceId, scene.workspaceId)),
    ).toHaveLength(1);
    const { changeSetId } = await askForChangeSet(scene.tester, backwards);
    expect((await askForChangeSet(scene.lead, backwards)).changeSetId).toBe(changeSetId);
    expect(await getChangeSetState(scene.tester, changeSetId)).toEqual({
      state: "computing",
      coverage: "not_asked",
    });
    expect(await doJobs(scene)).toContain("compute-change-set");
    expect(await getChangeSetState(scene.tester, changeSetId)).toEqual({
      state: "ready",
      coverage: "no_runs",
    });
    const [limit] = (await getRevisionChanges(scene.tester, before, after)).changes?.characteristics ?? [];
    expect(limit?.changes[0]?.before).not.toBe(limit?.changes[0]?.after);
  });

  test("are set against what stands, whatever the parent is", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const first = await addSmallRevision(scene, {});
    const second = await addSmallRevision(scene, { gain: 90 }, { parentId: first });
    const third = await addSmallRevision(scene, { gain: 80 }, { parentId: first });
    await doJobs(scene);
    await setState(scene, second, { state: "promoted", asFound: true });
    expect((await getRevisionChanges(scene.lead, third)).state).toBe("not_asked");
    await askForChangeSet(scene.lead, { revisionId: third, againstId: second });
    await doJobs(scene);
    expect(await getRevisionChanges(scene.lead, third)).toMatchObject({
      against: { id: second, stands: true, isParent: false },
      changes: { characteristics: [{ name: "gain", changes: [{ before: 9, after: 8 }] }] },
    });
  });

  test("are told as failed in a sentence when the image is lost, and tried again when asked", async ({
    tx,
  }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { before, after } = await twoRevisions(scene);
    const [row] = await tx.select().from(changeSets).where(eq(changeSets.revisionBId, after));
    const gone = {
      ...files.store,
      get: () => Promise.reject(new NotFoundError("object_not_found", "It is gone.")),
    };
    const job = { workspaceId: scene.workspaceId, changeSetId: row.id };
    await expect(computeChangeSet({ db: tx, store: gone }, job)).rejects.toThrow(NotFoundError);
    expect(await getRevisionChanges(scene.lead, after)).toMatchObject({
      state: "failed",
      failure: "It is gone.",
    });
    await askForChangeSet(scene.lead, { revisionId: after, againstId: before });
    await doJobs(scene);
    expect((await getRevisionChanges(scene.lead, after)).state).toBe("ready");
  });

  test("keep each reading once, as bytes under their own fingerprint", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    await twoRevisions(scene);
    await doJobs(scene);
    const kept = await tx
      .select()
      .from(imageReadings)
      .where(eq(imageReadings.workspaceId, scene.workspaceId));
    expect(kept).toHaveLength(2);
    for (const { blobSha256 } of kept) {
      const where = { store: files.store, workspaceId: scene.workspaceId };
      expect(sha256Of(await readBlob(where, blobSha256))).toBe(blobSha256);
    }
    const checks = await tx.select().from(imageChecks).where(eq(imageChecks.workspaceId, scene.workspaceId));
    expect(checks.map(({ result }) => result.fingerprintHolds)).toEqual([true, true]);
  });
});

describe("who sees changes", () => {
  test("staff; a reader where both revisions are released and shared; no admin, no stranger", async ({
    tx,
  }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { before, after } = await twoRevisions(scene);
    await doJobs(scene);
    const { reader, admin, lead, workspaceId, programmeId } = scene;
    for (const ctx of [reader, admin])
      await expect(getRevisionChanges(ctx, after)).rejects.toThrow(ForbiddenError);
    const share = {
      workspaceId,
      programmeId,
      userId: reader.userId,
      expiresOn: "2999-01-01",
      sharedBy: lead.userId,
    };
    await tx.insert(programmeShares).values(share);
    await expect(getRevisionChanges(reader, after)).rejects.toThrow(ForbiddenError);
    await setState(scene, before, { state: "superseded" });
    await setState(scene, after, { state: "promoted" });
    const view = await getRevisionChanges(reader, after);
    expect(view.changes?.changedBytes).toBeGreaterThan(0);
    expect(view.choices.map(({ id }) => id)).toEqual([before]);
    const draft = await addSmallRevision(scene, { gain: 3 }, { parentId: after });
    await expect(getRevisionChanges(reader, after, draft)).rejects.toThrow(ForbiddenError);
    await expect(askForChangeSet(reader, { revisionId: after, againstId: before })).rejects.toThrow(
      ForbiddenError,
    );
    const stranger = await createCalibrationScene(tx, files.store);
    await expect(getRevisionChanges(stranger.lead, after)).rejects.toThrow(NotFoundError);
    const foreign = await addSmallRevision(stranger, {});
    await expect(getRevisionChanges(lead, after, foreign)).rejects.toThrow(NotFoundError);
    await expect(askForChangeSet(lead, { revisionId: after, againstId: foreign })).rejects.toThrow(
      NotFoundError,
    );
    await expect(getChangeSetState(stranger.lead, view.changeSetId ?? "")).rejects.toThrow(NotFoundError);
  });
});

describe("a mark that says looked at", () => {
  test("is a person's own, and is gone when the thing changes", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { before, after } = await twoRevisions(scene);
    await doJobs(scene);
    const view = await getRevisionChanges(scene.lead, after);
    const digests = [
      view.changes?.characteristics[0]?.digest ?? "",
      view.changes?.uncovered[0]?.digest ?? "",
    ];
    const mark = { revisionId: after, changeSetId: view.changeSetId ?? "", digests, looked: true };
    await setLookedAt(scene.lead, mark);
    await setLookedAt(scene.lead, mark);
    expect((await getRevisionChanges(scene.lead, after)).lookedAt.sort()).toEqual([...digests].sort());
    expect((await getRevisionChanges(scene.tester, after)).lookedAt).toEqual([]);
    await setLookedAt(scene.lead, { ...mark, digests: [digests[1] ?? ""], looked: false });
    expect((await getRevisionChanges(scene.lead, after)).lookedAt).toEqual([digests[0]]);
    // Against another counterpart the same characteristic is another change.
    const other = await addSmallRevision(scene, { limit: 1234, curve: [1, 2, 3, 4] }, { parentId: before });
    await askForChangeSet(scene.lead, { revisionId: after, againstId: other });
    await doJobs(scene);
    expect((await getRevisionChanges(scene.lead, after, other)).lookedAt).toEqual([]);
    const unknown = { ...mark, digests: ["0".repeat(64)] };
    await expect(setLookedAt(scene.lead, unknown)).rejects.toThrow(ConflictError);
    await expect(setLookedAt(scene.lead, { ...mark, revisionId: before })).rejects.toThrow(NotFoundError);
    for (const ctx of [scene.reader, scene.admin])
      await expect(setLookedAt(ctx, mark)).rejects.toThrow(ForbiddenError);
    const stranger = await createCalibrationScene(tx, files.store);
    await expect(setLookedAt(stranger.lead, mark)).rejects.toThrow(NotFoundError);
  });
});

describe("a download of values", () => {
  const textOf = ({ pieces }: { pieces: Iterable<string> }) => [...pieces].join("");

  test("holds the values after the change, or both, and is noted", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { after } = await twoRevisions(scene);
    await expect(exportRevisionValues(scene.lead, { revisionId: after, format: "csv" })).rejects.toThrow(
      /not read yet/,
    );
    await doJobs(scene);
    const { changeSetId } = await getRevisionChanges(scene.lead, after);
    const id = changeSetId ?? "";
    const cdfx = await exportChangeSet(scene.tester, { changeSetId: id, format: "cdfx" });
    expect(cdfx.fileName).toBe("R1 to R2.cdfx");
    expect(textOf(cdfx)).toMatch(/<SHORT-NAME>rpm_limit<\/SHORT-NAME>[\s\S]*<V>7000<\/V>/);
    const csv = textOf(await exportChangeSet(scene.tester, { changeSetId: id, format: "csv" }));
    expect(csv).toMatch(/rpm_limit.*6600.*7000/);
    const all = textOf(await exportRevisionValues(scene.calibrator, { revisionId: after, format: "csv" }));
    expect(all).toMatch(/gain.*10/);
    const entries = await tx.select().from(ledger).where(eq(ledger.event, "values.exported"));
    expect(entries.filter(({ workspaceId }) => workspaceId === scene.workspaceId)).toHaveLength(3);
    await tx.update(rateLimits).set({ count: 300 });
    for (const again of [
      () => exportChangeSet(scene.tester, { changeSetId: id, format: "csv" }),
      () => exportRevisionValues(scene.calibrator, { revisionId: after, format: "csv" }),
    ])
      await expect(again()).rejects.toThrow(/at most 300 times an hour/);
  });

  test("is not for readers, admins and strangers, and not without a description", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { after } = await twoRevisions(scene);
    await doJobs(scene);
    const changeSetId = (await getRevisionChanges(scene.lead, after)).changeSetId ?? "";
    for (const ctx of [scene.reader, scene.admin]) {
      await expect(exportChangeSet(ctx, { changeSetId, format: "csv" })).rejects.toThrow(ForbiddenError);
      await expect(exportRevisionValues(ctx, { revisionId: after, format: "csv" })).rejects.toThrow(
        ForbiddenError,
      );
    }
    const stranger = await createCalibrationScene(tx, files.store);
    await expect(exportChangeSet(stranger.lead, { changeSetId, format: "csv" })).rejects.toThrow(
      NotFoundError,
    );
    const absent = { revisionId: randomUUID(), format: "cdfx" as const };
    await expect(exportRevisionValues(scene.lead, absent)).rejects.toThrow(NotFoundError);
    const bare = await addSmallRevision(scene, { gain: 1 }, { a2l: null });
    await expect(exportRevisionValues(scene.lead, { revisionId: bare, format: "cdfx" })).rejects.toThrow(
      /no description/,
    );
  });
});
