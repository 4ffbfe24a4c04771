import { randomUUID } from "node:crypto";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { InvalidInputError, NotFoundError } from "@/lib/errors";
import { knownSets } from "@/lib/services/calibration-settings/known-sets";
import { quantitiesToLink } from "@/lib/services/calibration-settings/quantities-to-link";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import { getParentChoices } from "@/lib/services/revisions/choose-parent";
import { addRevision } from "@/lib/services/revisions/create";
import {
  addSmallRevision,
  type CalibrationScene,
  createCalibrationScene,
  doJobs,
} from "@/tests/support/calibration-scene";
import { test } from "@/tests/support/database";
import { smallA2l, smallHex } from "@/tests/support/small-calibration";
import { createTestStore } from "@/tests/support/store";
import { uploadBytes } from "@/tests/support/upload-bytes";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

/** Adds a revision that takes its parent's description over, with files of its own beside it if `a2l` is given. */
async function addAlike(scene: CalibrationScene, parentId: string | null, a2l: Buffer | null = null) {
  const { calibrator, programmeId } = scene;
  const text = {
    title: "alike",
    note: "",
    changeReason: "",
    intendedUse: null,
    touchesEmissionOrSafety: null,
  };
  const uploadId = await uploadBytes(calibrator, "image", "small.hex", smallHex({ limit: 7000 }));
  const sent = a2l ? [await uploadBytes(calibrator, "description", "small.a2l", a2l)] : [];
  const request = {
    ...text,
    programmeId,
    parentId,
    uploadId,
    descriptionUploadIds: sent,
    sameDescription: true,
  };
  return (await addRevision(calibrator, request, randomUUID())).revisionId;
}

describe("the same description as the parent's", () => {
  test("is taken over without a file, and the page offers it by its files' names", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const bare = await addSmallRevision(scene, {}, { a2l: null });
    const parentId = await addSmallRevision(scene, {});
    const { parents } = await getParentChoices(scene.calibrator, scene.programmeId);
    expect(parents.map(({ id, descriptionFiles }) => [id, descriptionFiles])).toEqual([
      [parentId, ["small.a2l"]],
      [bare, null],
    ]);
    const child = await addAlike(scene, parentId);
    await doJobs(scene);
    const view = await getRevisionChanges(scene.lead, child);
    expect(view.changes).toMatchObject({ readBy: "both", characteristics: [{ name: "rpm_limit" }] });
    expect(view.descriptions.after?.id).toBe(view.descriptions.before?.id);
  });

  test("is refused without a parent that has one, and beside files", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const bare = await addSmallRevision(scene, {}, { a2l: null });
    await expect(addAlike(scene, null)).rejects.toThrow(InvalidInputError);
    await expect(addAlike(scene, bare)).rejects.toThrow("has no description to take over");
    await expect(addAlike(scene, bare, smallA2l())).rejects.toThrow("not both");
  });
});

describe("what the settings' pages offer", () => {
  test("are the functions of the descriptions and the quantities of what a revision changes", async ({
    tx,
  }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const { lead, programmeId } = scene;
    expect(await quantitiesToLink(lead, { programmeId })).toBeNull();
    const parentId = await addSmallRevision(scene, {});
    const child = await addAlike(scene, parentId);
    await doJobs(scene);
    expect(await knownSets(lead, programmeId)).toContain("limiter");
    expect(await quantitiesToLink(lead, { programmeId })).toMatchObject({ revision: { id: child } });
    expect(await quantitiesToLink(lead, { programmeId, revisionId: parentId })).toMatchObject({
      quantities: [],
    });
    await expect(quantitiesToLink(lead, { programmeId, revisionId: randomUUID() })).resolves.toBeNull();
    const elsewhere = await createCalibrationScene(tx, files.store);
    await expect(quantitiesToLink(elsewhere.lead, { programmeId, revisionId: child })).resolves.toBeNull();
    await expect(getRevisionChanges(elsewhere.lead, child)).rejects.toThrow(NotFoundError);
  });
});
