import { randomBytes } from "node:crypto";
import { chmod, readFile, writeFile } from "node:fs/promises";
import { join } from "node:path";
import fc from "fast-check";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { ConflictError, InvalidInputError, TwinpassError } from "@/lib/errors";
import { readVerified } from "@/storage/blob";
import { newStagingKey } from "@/storage/keys";
import { PART_BYTES } from "@/storage/port";
import { appendPart, discardStaged, promoteStaged, stagedBytes } from "@/storage/staging";
import { faultyStore } from "@/tests/support/faulty-store";
import {
  declarationOf,
  keysOf,
  readAll,
  sendParts,
  sha256Of,
  sourceOf,
  uploadBytes,
} from "@/tests/support/store-bytes";
import { filesystemHarness, type StoreHarness } from "@/tests/support/store-harness";

const FILE = randomBytes(2 * PART_BYTES + 777);
const WHOLE = { sizeBytes: FILE.length, sha256: sha256Of(FILE) };
const OFFSETS = [0, PART_BYTES, 2 * PART_BYTES];

describe("staging", () => {
  let harness: StoreHarness;
  beforeEach(async () => {
    harness = await filesystemHarness();
  });
  afterEach(async () => {
    await harness.close();
  });
  const partAt = (offsetBytes: number) => FILE.subarray(offsetBytes, offsetBytes + PART_BYTES);
  const append = (staging: ReturnType<typeof newStagingKey>, offsetBytes: number, store = harness.store) => {
    const bytes = partAt(offsetBytes);
    const part = { totalBytes: FILE.length, offsetBytes, sizeBytes: bytes.length, sha256: sha256Of(bytes) };
    return appendPart(store, staging, part, sourceOf(bytes));
  };

  test("goes on after a cut: a torn part counts for nothing, the offset says where to go on", async () => {
    const { store } = harness;
    const staging = newStagingKey("w");
    expect(await stagedBytes(store, staging)).toBe(0);
    expect(await append(staging, 0)).toEqual({ nextOffsetBytes: PART_BYTES });
    async function* cut() {
      yield partAt(PART_BYTES).subarray(0, 5000);
      throw new Error("connection reset");
    }
    const part = { totalBytes: FILE.length, offsetBytes: PART_BYTES, sizeBytes: PART_BYTES };
    await expect(appendPart(store, staging, part, cut())).rejects.toMatchObject({ code: "body_interrupted" });
    expect(await stagedBytes(store, staging)).toBe(PART_BYTES);
    const early = promoteStaged(store, staging, WHOLE);
    await expect(early).rejects.toMatchObject({
      code: "upload_incomplete",
      details: { offsetBytes: PART_BYTES },
    });
    await append(staging, PART_BYTES);
    expect(await append(staging, 2 * PART_BYTES)).toEqual({ nextOffsetBytes: FILE.length });
    const { key, outcome } = await promoteStaged(store, staging, WHOLE);
    expect(outcome).toBe("created");
    expect((await readAll(store, key)).equals(FILE)).toBe(true);
    await discardStaged(store, staging);
    expect(await keysOf(store, "w")).toEqual([key]);
  });

  test("refuses a part that is there already or comes too early, and says where to go on", async () => {
    const staging = newStagingKey("w");
    const early = append(staging, PART_BYTES);
    await expect(early).rejects.toMatchObject({ code: "upload_offset_moved", details: { offsetBytes: 0 } });
    await append(staging, 0);
    const again = append(staging, 0);
    await expect(again).rejects.toMatchObject({ status: 409, details: { offsetBytes: PART_BYTES } });
  });

  test.each([
    { offsetBytes: 1 },
    { offsetBytes: -PART_BYTES },
    { offsetBytes: Number.NaN },
    { offsetBytes: 3 * PART_BYTES },
    { sizeBytes: PART_BYTES - 1 },
    { sizeBytes: PART_BYTES + 1 },
    { totalBytes: 0 },
    { totalBytes: Number.MAX_VALUE },
    { sha256: "short" },
  ])("refuses a part with %j", async (wrong) => {
    const part = { totalBytes: FILE.length, offsetBytes: 0, sizeBytes: PART_BYTES, ...wrong };
    const refused = appendPart(harness.store, newStagingKey("w"), part, sourceOf(partAt(0)));
    await expect(refused).rejects.toBeInstanceOf(InvalidInputError);
  });

  test("refuses to finish other bytes than were announced; parts stay for a look, no blob appears", async () => {
    const staging = newStagingKey("w");
    await sendParts(harness.store, staging, FILE);
    const other = { ...WHOLE, sha256: sha256Of(Buffer.from("other")) };
    await expect(promoteStaged(harness.store, staging, other)).rejects.toMatchObject({
      code: "digest_mismatch",
    });
    const shorter = { ...WHOLE, sizeBytes: FILE.length - 1 };
    await expect(promoteStaged(harness.store, staging, shorter)).rejects.toMatchObject({ status: 413 });
    const longer = { ...WHOLE, sizeBytes: FILE.length + 1 };
    await expect(promoteStaged(harness.store, staging, longer)).rejects.toMatchObject({
      code: "body_too_short",
    });
    expect((await keysOf(harness.store, "w")).filter((key) => key.includes("/blob/"))).toEqual([]);
    expect(await stagedBytes(harness.store, staging)).toBe(FILE.length);
  });

  test("a second upload of the same bytes finds them there; another workspace gets its own copy", async () => {
    const bytes = randomBytes(5000);
    expect((await uploadBytes(harness.store, "w", bytes)).outcome).toBe("created");
    expect((await uploadBytes(harness.store, "w", bytes)).outcome).toBe("existed");
    expect((await uploadBytes(harness.store, "x", bytes)).outcome).toBe("created");
  });

  test("any order, repeats and gaps of parts end in the right bytes or a refusal", async () => {
    const check = async (order: number[]) => {
      const staging = newStagingKey("w");
      let inOrder = 0;
      for (const offset of order) {
        const result = await append(staging, offset).catch((error: unknown) => error);
        if (offset === inOrder) inOrder = Math.min(inOrder + PART_BYTES, FILE.length);
        else expect(result).toBeInstanceOf(ConflictError);
        expect(await stagedBytes(harness.store, staging)).toBe(inOrder);
      }
      const finished = promoteStaged(harness.store, staging, WHOLE);
      if (inOrder === FILE.length)
        expect((await readAll(harness.store, (await finished).key)).equals(FILE)).toBe(true);
      else await expect(finished).rejects.toMatchObject({ code: "upload_incomplete" });
      await discardStaged(harness.store, staging);
    };
    const orders = fc.array(fc.constantFrom(...OFFSETS), { maxLength: 6 });
    await fc.assert(fc.asyncProperty(orders, check), { numRuns: 15, examples: [[OFFSETS]] });
  });

  test.each(["before", "after"] as const)(
    "survives any one store call failing (%s it was done)",
    async (when) => {
      const bytes = randomBytes(4000);
      const { key, declared } = declarationOf("w", bytes);
      let failCall = 1;
      for (let failed = true; failed; failCall++) {
        const staging = newStagingKey("w");
        const { store, calls } = faultyStore(harness.store, { failCall, when });
        const whole = async () => {
          const part = { totalBytes: bytes.length, offsetBytes: 0, sizeBytes: bytes.length };
          await appendPart(store, staging, part, sourceOf(bytes));
          await promoteStaged(store, staging, declared);
          await discardStaged(store, staging);
        };
        await whole().catch(() => undefined);
        failed = calls.length >= failCall;
        // Whatever happened, a blob is right or absent, and the same bytes can be sent again at once.
        const blobs = (await keysOf(harness.store, "w")).filter((name) => name.includes("/blob/"));
        if (blobs.length > 0) expect((await readAll(harness.store, key)).equals(bytes)).toBe(true);
        await discardStaged(harness.store, staging);
        await uploadBytes(harness.store, "w", bytes);
        await harness.store.remove(key);
      }
      expect(failCall).toBeGreaterThan(5);
    },
  );

  test("gives out a blob only when its bytes are what the key says, small or large", async () => {
    const { root } = harness.config as { root: string };
    for (const size of [5000, PART_BYTES + 5000]) {
      const bytes = randomBytes(size);
      const { key } = await uploadBytes(harness.store, "w", bytes);
      const good = await readVerified(harness.store, key);
      expect(good.sizeBytes).toBe(size);
      expect(Buffer.concat(await good.body.toArray()).equals(bytes)).toBe(true);
      const path = join(root, key);
      const flipped = await readFile(path);
      flipped[size >> 1] = (flipped[size >> 1] ?? 0) ^ 1;
      await chmod(path, 0o600);
      await writeFile(path, flipped);
      let given = 0;
      const reading = (async () => {
        const { body } = await readVerified(harness.store, key);
        for await (const chunk of body) given += (chunk as Buffer).length;
      })();
      await expect(reading).rejects.toMatchObject({ code: "stored_bytes_damaged" });
      await expect(reading).rejects.toBeInstanceOf(TwinpassError);
      expect(given).toBeLessThan(size > PART_BYTES ? size : 1);
    }
  });
});
