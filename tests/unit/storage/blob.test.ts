import { randomBytes } from "node:crypto";
import { chmod, readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { InvalidInputError } from "@/lib/errors";
import { hashBlob } from "@/storage/blob";
import { newStagingKey, partKey } from "@/storage/keys";
import { PART_BYTES } from "@/storage/port";
import { faultyStore } from "@/tests/support/faulty-store";
import {
  declarationOf,
  discard,
  keysOf,
  promote,
  readAll,
  sendParts,
  sha256Of,
  sourceOf,
  uploadBytes,
} from "@/tests/support/store-bytes";
import { filesystemHarness, type StoreHarness } from "@/tests/support/store-harness";

describe("blob", { timeout: 30_000 }, () => {
  let harness: StoreHarness;
  beforeEach(async () => {
    harness = await filesystemHarness();
  });
  afterEach(async () => {
    await harness.close();
  });
  async function flip(key: string) {
    const path = join((harness.config as { root: string }).root, key);
    const bytes = await readFile(path);
    bytes[0] = (bytes[0] ?? 0) ^ 1;
    await chmod(path, 0o600);
    await writeFile(path, bytes);
  }

  test("the same bytes again find what is there, read back; another workspace gets its own copy", async () => {
    const bytes = randomBytes(5000);
    const { key } = declarationOf("w", bytes);
    expect((await uploadBytes(harness.store, "w", bytes)).outcome).toBe("created");
    expect((await uploadBytes(harness.store, "w", bytes)).outcome).toBe("existed");
    expect((await uploadBytes(harness.store, "x", bytes)).outcome).toBe("created");
    expect(await hashBlob(harness.store, key)).toEqual({ sizeBytes: 5000, sha256: sha256Of(bytes) });
    await flip(key);
    await expect(uploadBytes(harness.store, "w", bytes)).rejects.toMatchObject({
      code: "stored_bytes_damaged",
    });
    expect((await readAll(harness.store, key)).equals(bytes)).toBe(false);
  });

  test("a damaged part never becomes a blob", async () => {
    const bytes = randomBytes(PART_BYTES + 5);
    const { key } = declarationOf("w", bytes);
    const staging = newStagingKey("w");
    await sendParts(harness.store, staging, bytes);
    await flip(partKey(staging, PART_BYTES));
    const finished = promote(harness.store, staging, key, bytes.length);
    await expect(finished).rejects.toMatchObject({ code: "digest_mismatch" });
    await harness.store.remove(partKey(staging, PART_BYTES));
    const shorter = promote(harness.store, staging, key, bytes.length);
    await expect(shorter).rejects.toMatchObject({ code: "body_too_short" });
    expect((await keysOf(harness.store, "w")).filter((name) => name.includes("/blob/"))).toEqual([]);
  });

  test.each([
    { sizeBytes: -1 },
    { sizeBytes: 1.5 },
    { sizeBytes: Number.NaN },
    { sizeBytes: 4, sha256: "short" },
    { sizeBytes: 4, sha256: "f".repeat(64) },
  ])("refuses the declaration %j", async (declared) => {
    const { key } = declarationOf("w", Buffer.from("four"));
    const refused = harness.store.create(key, sourceOf(Buffer.from("four")), declared);
    await expect(refused).rejects.toBeInstanceOf(InvalidInputError);
  });

  test.each(["before", "after"] as const)(
    "survives any one store call failing (%s it was done)",
    async (when) => {
      const bytes = randomBytes(4000);
      const { key } = declarationOf("w", bytes);
      let failCall = 1;
      for (let failed = true; failed; failCall++) {
        const { store, calls } = faultyStore(harness.store, { failCall, when });
        const whole = async () => {
          const { staging } = await uploadBytes(store, "w", bytes);
          await discard(store, staging);
        };
        const outcome = await whole().catch((error: Error) => error.message);
        failed = calls.length >= failCall;
        if (failed) expect(outcome).toBeTypeOf("string");
        // Whatever happened, a blob is right or absent, and the same bytes can be sent again at once.
        const blobs = (await keysOf(harness.store, "w")).filter((name) => name.includes("/blob/"));
        if (blobs.length > 0) expect((await readAll(harness.store, key)).equals(bytes)).toBe(true);
        await uploadBytes(harness.store, "w", bytes);
        await harness.store.remove(key);
      }
      expect(failCall).toBeGreaterThan(5);
    },
  );
});
