import { randomUUID } from "node:crypto";
import { eq, sql } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { blobs, descriptions, ledger, revisions } from "@/db/tables";
import { ConflictError, ForbiddenError, InvalidInputError, NotFoundError } from "@/lib/errors";
import { readBlob } from "@/lib/services/blobs";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import type { Ctx } from "@/lib/services/ctx";
import { addDescription } from "@/lib/services/descriptions/add";
import {
  addSmallRevision,
  createCalibrationScene,
  doJobs,
  setState,
} from "@/tests/support/calibration-scene";
import { test } from "@/tests/support/database";
import { smallA2l } from "@/tests/support/small-calibration";
import { createTestStore } from "@/tests/support/store";
import { sha256Of, uploadBytes } from "@/tests/support/upload-bytes";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

/** Sends files and adds them, the first as the main one. */
async function describeIt(
  ctx: Ctx,
  revisionId: string,
  sent: readonly (readonly [string, Buffer])[],
  { rowVersion = 1, key = randomUUID() as string } = {},
) {
  const uploadIds = [];
  for (const [name, bytes] of sent) uploadIds.push(await uploadBytes(ctx, "description", name, bytes));
  return await addDescription(ctx, { revisionId, rowVersion, uploadIds }, key);
}
const small = (a2l = smallA2l()) => [["small.a2l", a2l]] as const;

describe("adding a description", () => {
  test("keeps its files, reads them in the worker, and has the changes worked out by it", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const before = await addSmallRevision(scene, {}, { a2l: null });
    const after = await addSmallRevision(scene, { limit: 7000 }, { parentId: before, a2l: null });
    await doJobs(scene);
    expect((await getRevisionChanges(scene.lead, after)).changes?.readBy).toBe("none");
    const added = await describeIt(scene.calibrator, after, small());
    expect(added.rowVersion).toBe(2);
    expect((await getRevisionChanges(scene.lead, after)).state).toBe("computing");
    await doJobs(scene);
    const view = await getRevisionChanges(scene.lead, after);
    expect(view.changes).toMatchObject({ readBy: "b", characteristics: [{ name: "rpm_limit" }] });
    const sha256 = sha256Of(smallA2l());
    const kept = await tx.select().from(blobs).where(eq(blobs.sha256, sha256));
    expect(kept.some(({ workspaceId }) => workspaceId === scene.workspaceId)).toBe(true);
    const entries = await tx.select().from(ledger).where(eq(ledger.event, "revision.described"));
    expect(entries.at(-1)?.data).toMatchObject({ number: 2, files: [{ name: "small.a2l", sha256 }] });
  });

  test("takes several files in their order: includes are found among them", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const revisionId = await addSmallRevision(scene, {}, { a2l: null });
    const [head = "", rest = ""] = smallA2l()
      .toString()
      .split(/(?=\/begin CHARACTERISTIC rpm_limit)/);
    const [included = "", tail = ""] = rest.split(/(?=\/begin FUNCTION limiter)/);
    const main = Buffer.from(`${head}/include "values.a2l"\n${tail}`);
    await describeIt(scene.calibrator, revisionId, [
      ["main.a2l", main],
      ["values.a2l", Buffer.from(included)],
    ]);
    await doJobs(scene);
    const { after } = (await getRevisionChanges(scene.lead, revisionId)).descriptions;
    expect(after).toMatchObject({ state: "read", fileNames: ["main.a2l", "values.a2l"] });
    expect(after?.summary).toMatchObject({
      counts: { VALUE: 2, CURVE: 1, AXIS_PTS: 1 },
      missingIncludes: [],
    });
  });

  test("is one description a programme for the same files, and one answer for the same key", async ({
    tx,
  }) => {
    const scene = await createCalibrationScene(tx, files.store);
    await addSmallRevision(scene, {});
    const second = await addSmallRevision(scene, { gain: 2 }, { a2l: null });
    const uploadId = await uploadBytes(scene.calibrator, "description", "small.a2l", smallA2l());
    const input = { revisionId: second, rowVersion: 1, uploadIds: [uploadId] };
    const answer = await addDescription(scene.calibrator, input, "the-same-key");
    expect(await addDescription(scene.calibrator, input, "the-same-key")).toEqual(answer);
    const rows = await tx.select().from(descriptions).where(eq(descriptions.programmeId, scene.programmeId));
    expect(rows).toHaveLength(1);
  });

  test("replaces a draft's own, by its author only; later only where there is none", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const other = small(smallA2l({ unit: "°" }));
    const revisionId = await addSmallRevision(scene, {});
    const bare = await addSmallRevision(scene, { gain: 5 }, { a2l: null });
    await expect(describeIt(scene.otherCalibrator, revisionId, other)).rejects.toThrow(ForbiddenError);
    await describeIt(scene.calibrator, revisionId, other);
    await setState(scene, revisionId, { state: "validating" });
    await setState(scene, bare, { state: "promoted" });
    await expect(describeIt(scene.calibrator, revisionId, small(), { rowVersion: 2 })).rejects.toThrow(
      /must be draft/,
    );
    await describeIt(scene.otherCalibrator, bare, other);
    const replaced = tx.transaction((inner) =>
      inner.update(revisions).set({ descriptionId: null }).where(eq(revisions.id, revisionId)),
    );
    // 42501 is insufficient_privilege in the table of PostgreSQL's error codes (appendix A of its manual).
    await expect(replaced).rejects.toMatchObject({ cause: { code: "42501" } });
  });

  test("is refused by role, for strangers, on what has moved, and for files of one name", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const revisionId = await addSmallRevision(scene, {}, { a2l: null });
    const input = { revisionId, rowVersion: 1, uploadIds: [randomUUID()] };
    for (const ctx of [scene.tester, scene.lead, scene.reader, scene.admin])
      await expect(addDescription(ctx, input, randomUUID())).rejects.toThrow(ForbiddenError);
    const stranger = await createCalibrationScene(tx, files.store);
    await expect(describeIt(stranger.calibrator, revisionId, small())).rejects.toThrow(NotFoundError);
    await expect(describeIt(scene.calibrator, revisionId, small(), { rowVersion: 9 })).rejects.toThrow(
      ConflictError,
    );
    await setState(scene, revisionId, { setAsideAt: new Date(), setAsideReason: "a mistake" });
    await expect(describeIt(scene.calibrator, revisionId, small())).rejects.toThrow(/set aside/);
    const twice = [...small(), ...small(smallA2l({ unit: "°" }))];
    await expect(describeIt(scene.calibrator, revisionId, twice)).rejects.toThrow(InvalidInputError);
    const asImage = await uploadBytes(scene.calibrator, "image", "small.a2l", smallA2l());
    const wrong = addDescription(scene.calibrator, { ...input, uploadIds: [asImage] }, randomUUID());
    await expect(wrong).rejects.toThrow(/was not sent as description/);
  });

  test("puts bytes into the store before any row names them, and row, entry and jobs together", async ({
    database,
  }) => {
    const { db } = database;
    const scene = await createCalibrationScene(db, files.store);
    const revisionId = await addSmallRevision(scene, {}, { a2l: null });
    const a2l = smallA2l({ unit: randomUUID().slice(0, 8) });
    const key = randomUUID();
    const uploadId = await uploadBytes(scene.calibrator, "description", "small.a2l", a2l);
    // A name that the database can't keep makes the ledger's entry fail, so nothing of the rest may stay.
    const input = { revisionId, rowVersion: 1, uploadIds: [uploadId] };
    await expect(addDescription({ ...scene.calibrator, userName: "\0" }, input, key)).rejects.toThrow();
    const where = { store: files.store, workspaceId: scene.workspaceId };
    expect(Buffer.from(await readBlob(where, sha256Of(a2l))).equals(a2l)).toBe(true);
    const none = await db.select().from(descriptions).where(eq(descriptions.programmeId, scene.programmeId));
    expect(none).toEqual([]);
    const { rows } = await db.execute(
      sql`select from pgboss.job where name = 'read-description' and data->>'workspaceId' = ${scene.workspaceId}`,
    );
    expect(rows).toEqual([]);
    await addDescription(scene.calibrator, input, key);
    expect(
      await db.select().from(descriptions).where(eq(descriptions.programmeId, scene.programmeId)),
    ).toHaveLength(1);
  });
});
