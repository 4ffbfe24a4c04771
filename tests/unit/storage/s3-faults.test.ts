import { randomBytes } from "node:crypto";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { NotFoundError, OutOfSpaceError, UnavailableError } from "@/lib/errors";
import { newStagingKey, partKey } from "@/storage/keys";
import { openStore } from "@/storage/open";
import { PART_BYTES } from "@/storage/port";
import type { Fault } from "@/tests/support/s3-server";
import { declarationOf, readAll, sourceOf } from "@/tests/support/store-bytes";
import { s3Harness } from "@/tests/support/store-harness";

const SMALL = randomBytes(2000);
const LARGE = randomBytes(PART_BYTES + 2000);

describe("S3 store when the other side fails", { timeout: 60_000 }, () => {
  let harness: Awaited<ReturnType<typeof s3Harness>>;
  beforeEach(async () => {
    harness = await s3Harness();
  });
  afterEach(async () => {
    await harness.close();
  });
  /** Answers the first `times` requests of one operation with a fault. */
  function failing(operation: string, fault: Fault, times: number) {
    let left = times;
    harness.server.fault = (name) => (name === operation && left-- > 0 ? fault : undefined);
  }
  const create = (bytes: Buffer) => {
    const { key, declared } = declarationOf("w", bytes);
    return harness.store.create(key, sourceOf(bytes), declared);
  };
  const counted = (operation: string) =>
    harness.server.operations.filter((name) => name === operation).length;

  test.each<[string, Buffer, Fault]>([
    ["PutObject", SMALL, { status: 503, code: "SlowDown" }],
    ["PutObject", SMALL, { status: 500, code: "InternalError" }],
    ["PutObject", SMALL, "reset"],
    ["CreateMultipartUpload", LARGE, { status: 500, code: "InternalError" }],
    ["UploadPart", LARGE, "reset"],
    ["CompleteMultipartUpload", LARGE, { status: 500, code: "InternalError" }],
  ])("tries %s again, three times in all, then fails cleanly", async (operation, bytes, fault) => {
    const { key } = declarationOf("w", bytes);
    failing(operation, fault, 2);
    expect(await create(bytes)).toBe("created");
    expect((await readAll(harness.store, key)).equals(bytes)).toBe(true);
    await harness.store.remove(key);
    const before = counted(operation);
    failing(operation, fault, 99);
    await expect(create(bytes)).rejects.toBeInstanceOf(UnavailableError);
    expect(counted(operation) - before).toBe(3);
    await expect(harness.store.stat(key)).rejects.toBeInstanceOf(NotFoundError);
    expect(await harness.unfinished()).toBe(0);
  });

  test.each([
    ["PutObject", SMALL],
    ["CompleteMultipartUpload", LARGE],
  ])("finds its own object when the answer to %s was lost", async (operation, bytes) => {
    failing(operation, "lose-answer", 1);
    expect(await create(bytes)).toBe("existed");
    expect((await readAll(harness.store, declarationOf("w", bytes).key)).equals(bytes)).toBe(true);
  });

  test.each([
    ["PutObject", SMALL],
    ["CompleteMultipartUpload", LARGE],
  ])(
    "waits while another writer is at the same key (409 to %s), and gives up in the end",
    async (operation, bytes) => {
      const conflict = { status: 409, code: "ConditionalRequestConflict" };
      failing(operation, conflict, 2);
      expect(await create(bytes)).toBe("created");
      await harness.store.remove(declarationOf("w", bytes).key);
      failing(operation, conflict, 99);
      await expect(create(bytes)).rejects.toMatchObject({ code: "store_busy", status: 503 });
      expect(await harness.unfinished()).toBe(0);
    },
  );

  test("compares what a 412 says is there, and names a damaged copy", async () => {
    const { key } = declarationOf("w", SMALL);
    harness.server.bucket.put(key, Buffer.from("other bytes"), undefined);
    await expect(create(SMALL)).rejects.toMatchObject({ code: "stored_bytes_damaged", status: 503 });
    expect(harness.server.bucket.get(key).bytes.toString()).toBe("other bytes");
  });

  test.each(["PutObject", "UploadPart"])(
    "refuses a store that kept fewer bytes than it said (%s)",
    async (name) => {
      const bytes = name === "PutObject" ? SMALL : LARGE;
      failing(name, "store-less", 1);
      await expect(create(bytes)).rejects.toMatchObject({ status: 503 });
      // Nobody else can know the wrong copy yet, so it is gone and the next try puts it right.
      await expect(harness.store.stat(declarationOf("w", bytes).key)).rejects.toBeInstanceOf(NotFoundError);
      expect(await create(bytes)).toBe("created");
    },
  );

  test.each(["refused", "ignored"] as const)("looks first where conditional create is %s", async (manner) => {
    harness.server.bucket.conditionalCreate = manner;
    expect((await harness.store.check()).conditionalCreate).toBe("none");
    const key = partKey(newStagingKey("w"), 0);
    expect(await harness.store.create(key, sourceOf(SMALL), { sizeBytes: SMALL.length })).toBe("created");
    expect(await harness.store.create(key, sourceOf(Buffer.from("later")), { sizeBytes: 5 })).toBe("existed");
    expect(await readAll(harness.store, key)).toEqual(SMALL);
    expect(await create(LARGE)).toBe("created");
    expect(await create(LARGE)).toBe("existed");
    expect(await harness.unfinished()).toBe(0);
  });

  test("falls back on a 501 without a check before", async () => {
    harness.server.bucket.conditionalCreate = "refused";
    expect(await create(LARGE)).toBe("created");
    expect(await create(SMALL)).toBe("created");
    expect(await create(SMALL)).toBe("existed");
  });

  test("ends with an error, never early, when the answer is cut", async () => {
    await create(LARGE);
    failing("GetObject", "cut-answer", 1);
    const { body } = await harness.store.get(declarationOf("w", LARGE).key);
    await expect(body.toArray()).rejects.toBeInstanceOf(UnavailableError);
  });

  test.each([
    [{ status: 507, code: "InsufficientStorage" }, OutOfSpaceError, "store_full"],
    [{ status: 403, code: "AccessDenied" }, UnavailableError, "store_refused"],
    [{ status: 404, code: "NoSuchBucket" }, UnavailableError, "bucket_missing"],
    [{ status: 501, code: "NotImplemented" }, UnavailableError, "store_unavailable"],
  ] as const)("names %j", async (fault, type, code) => {
    harness.server.fault = () => fault;
    const failure = harness.store.create(partKey(newStagingKey("w"), 0), sourceOf(SMALL), {
      sizeBytes: SMALL.length,
    });
    await expect(failure).rejects.toBeInstanceOf(type);
    await expect(failure).rejects.toMatchObject({ code });
  });

  test("says so when the store is away or its bucket is missing", async () => {
    const { endpoint } = harness.server;
    const config = { ...harness.server.keys, driver: "s3", endpoint, forcePathStyle: true } as const;
    const elsewhere = await openStore({ ...config, bucket: "not-there" });
    await expect(elsewhere.check()).rejects.toMatchObject({ code: "bucket_missing" });
    await harness.server.close();
    await expect(harness.store.check()).rejects.toMatchObject({ code: "store_unavailable" });
  });

  test("clears open uploads of killed writers over several pages, and only old ones of ours", async () => {
    const { bucket } = harness.server;
    bucket.uploadsPageMax = 2;
    for (let n = 0; n < 5; n++) bucket.begin(declarationOf("w", randomBytes(8)).key);
    const foreign = ["somebody/else", "ws/w/report.pdf"];
    for (const key of foreign) bucket.begin(key);
    expect(await harness.store.removeUnfinished(Date.now() - 60_000)).toBe(0);
    expect(await harness.store.removeUnfinished(Date.now() + 60_000)).toBe(5);
    expect([...bucket.uploads.values()].map(({ key }) => key)).toEqual(foreign);
  });
});
