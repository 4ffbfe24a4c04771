import { randomUUID } from "node:crypto";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { askForChangeSet } from "@/lib/services/change-sets/ask";
import { getRevisionChanges } from "@/lib/services/change-sets/get";
import { addRevision } from "@/lib/services/revisions/create";
import { openRevisionImage } from "@/lib/services/revisions/open-image";
import { type CalibrationScene, createCalibrationScene, doJobs } from "@/tests/support/calibration-scene";
import { test } from "@/tests/support/database";
import { smallBytes, smallHex } from "@/tests/support/small-calibration";
import { createTestStore } from "@/tests/support/store";
import { sha256Of, uploadBytes } from "@/tests/support/upload-bytes";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

async function add(
  { calibrator, programmeId }: CalibrationScene,
  fileName: string,
  bytes: Buffer,
  baseAddress = "",
): Promise<string> {
  const uploadId = await uploadBytes(calibrator, "image", fileName, bytes);
  const stated = {
    title: "kept",
    note: "",
    changeReason: "",
    intendedUse: null,
    touchesEmissionOrSafety: null,
  };
  const request = { ...stated, programmeId, parentId: null, uploadId, baseAddress };
  return (await addRevision(calibrator, request, randomUUID())).revisionId;
}

describe("an image that came in", () => {
  test("is given out byte for byte, whatever its container; its content is one and the same", async ({
    tx,
  }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const lower = Buffer.from(smallHex().toString().toLowerCase().replaceAll("\n", "\r\n"));
    const sent = [
      ["upper.hex", smallHex()],
      ["lower.hex", lower],
      // The small image begins at 0x8000.
      ["raw.bin", smallBytes(), "0x8000"],
    ] as const;
    const ids: string[] = [];
    for (const [name, bytes, base] of sent) ids.push(await add(scene, name, bytes, base));
    for (const [at, [name, bytes]] of sent.entries()) {
      const { body, fileName, sha256 } = await openRevisionImage(scene.lead, { revisionId: ids[at] });
      const parts: Uint8Array[] = [];
      for await (const part of body) parts.push(part);
      expect(Buffer.concat(parts).equals(bytes), name).toBe(true);
      expect([fileName, sha256]).toEqual([name, sha256Of(bytes)]);
    }
    const [first, ...others] = ids;
    for (const revisionId of others) await askForChangeSet(scene.lead, { revisionId, againstId: first });
    await doJobs(scene);
    for (const revisionId of others)
      expect((await getRevisionChanges(scene.lead, revisionId, first)).changes).toMatchObject({
        ...{ identical: true, changedBytes: 0 },
      });
  });

  test("as a raw binary needs the address that it begins at", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    await expect(add(scene, "raw.bin", smallBytes())).rejects.toMatchObject({ code: "base_address_missing" });
    await expect(add(scene, "raw.bin", smallBytes(), "0xFFFFFFF0")).rejects.toMatchObject({
      code: "address_out_of_range",
    });
  });
});
