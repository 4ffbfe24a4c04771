import { randomUUID } from "node:crypto";
import { readdirSync } from "node:fs";
import { afterAll, beforeAll, describe, expect } from "vitest";
import { rateLimits } from "@/db/tables";
import { ConflictError, ForbiddenError, NotFoundError, TooLargeError } from "@/lib/errors";
import { checkValuesFile } from "@/lib/services/change-sets/check-values-file";
import { exportRevisionValues } from "@/lib/services/change-sets/export";
import { LARGEST_VALUES_FILE_BYTES } from "@/lib/services/change-sets/schema";
import { addSmallRevision, createCalibrationScene, doJobs } from "@/tests/support/calibration-scene";
import { test } from "@/tests/support/database";
import { createTestStore } from "@/tests/support/store";

let files: ReturnType<typeof createTestStore>;
beforeAll(() => {
  files = createTestStore();
});
afterAll(() => files.drop());

async function* bodyOf(...pieces: (string | Uint8Array)[]) {
  for (const piece of pieces) yield Buffer.from(piece);
}

// The small image by hand: rpm_limit 6600, gain 100 · 0.1, a curve of four points and its shared axis: 10 values in 4 names.
describe("a values file against a revision", () => {
  test("agrees with what was exported, tells what differs, and is not kept", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const revisionId = await addSmallRevision(scene, {});
    await doJobs(scene);
    const { pieces } = await exportRevisionValues(scene.lead, { revisionId, format: "cdfx" });
    const text = [...pieces].join("");
    for (const ctx of [scene.calibrator, scene.otherCalibrator, scene.tester, scene.lead]) {
      const same = await checkValuesFile(ctx, {
        revisionId,
        body: bodyOf(text.slice(0, 90), text.slice(90)),
      });
      expect(same).toMatchObject({
        ...{ inFile: 4, compared: 4, equal: 4, values: 10 },
        ...{
          differing: { count: 0, first: [] },
          notInImage: { count: 0 },
          notInFile: { count: 0 },
          problems: [],
        },
      });
    }
    const other = text
      .replace("<V>6600</V>", "<V>6800</V>")
      .replace("<SHORT-NAME>gain</SHORT-NAME>", "<SHORT-NAME>gains</SHORT-NAME>");
    const stored = readdirSync(files.root, { recursive: true });
    expect(await checkValuesFile(scene.tester, { revisionId, body: bodyOf(other) })).toMatchObject({
      ...{ inFile: 4, compared: 3, equal: 2, values: 9 },
      differing: {
        count: 1,
        first: [{ name: "rpm_limit", index: [], file: 6800, image: 6600, difference: 200, unit: "1/min" }],
      },
      notInImage: { count: 1, first: ["gains"] },
      notInFile: { count: 1, first: ["gain"] },
    });
    expect(readdirSync(files.root, { recursive: true })).toEqual(stored);
  });

  test("is not for readers, admins and strangers", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const revisionId = await addSmallRevision(scene, {});
    await doJobs(scene);
    const never: AsyncIterable<Uint8Array> = {
      [Symbol.asyncIterator]() {
        throw new Error("the body of somebody who may not ask is not read");
      },
    };
    const asked = { revisionId, body: never };
    for (const ctx of [scene.reader, scene.admin])
      await expect(checkValuesFile(ctx, asked)).rejects.toThrow(ForbiddenError);
    const stranger = await createCalibrationScene(tx, files.store);
    await expect(checkValuesFile(stranger.lead, asked)).rejects.toThrow(NotFoundError);
    const absent = { revisionId: randomUUID(), body: never };
    await expect(checkValuesFile(scene.lead, absent)).rejects.toThrow(NotFoundError);
  });

  test("needs a description that was read", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const bare = await addSmallRevision(scene, {}, { a2l: null });
    const check = (revisionId: string) =>
      checkValuesFile(scene.lead, { revisionId, body: bodyOf("<MSRSW/>") });
    await expect(check(bare)).rejects.toThrow(/has no description.*Add one/);
    const waiting = await addSmallRevision(scene, { gain: 1 });
    await expect(check(waiting)).rejects.toThrow(ConflictError);
    await doJobs(scene);
    const refused = await addSmallRevision(scene, { gain: 2 }, { a2l: Buffer.from("/begin PROJECT x") });
    await doJobs(scene);
    await expect(check(refused)).rejects.toThrow(/R3 was refused, so its values are not known\. \S/);
    expect(await check(waiting)).toMatchObject({ inFile: 0, compared: 0, notInFile: { count: 4 } });
  });

  test("is refused when it is larger than 16 MB, empty, or no values file", async ({ tx }) => {
    const scene = await createCalibrationScene(tx, files.store);
    const revisionId = await addSmallRevision(scene, {});
    await doJobs(scene);
    const check = (body: AsyncIterable<Uint8Array>) => checkValuesFile(scene.lead, { revisionId, body });
    let given = 0;
    const endless = async function* () {
      for (;;) {
        given += 1_000_000;
        yield new Uint8Array(1_000_000);
      }
    };
    await expect(check(endless())).rejects.toThrow(TooLargeError);
    expect(given).toBe(LARGEST_VALUES_FILE_BYTES + 1_000_000);
    await expect(check(bodyOf())).rejects.toMatchObject({ code: "empty_file" });
    await expect(check(bodyOf(":00000001FF"))).rejects.toMatchObject({ code: "file_damaged" });
    await expect(check(bodyOf("<html/>"))).rejects.toMatchObject({ code: "not_cdf" });
    await tx.update(rateLimits).set({ count: 120 });
    await expect(check(bodyOf("<MSRSW/>"))).rejects.toThrow("check values files at most 120 times an hour");
  });
});
