import { execFile } from "node:child_process";
import { randomBytes } from "node:crypto";
import { setTimeout as sleep } from "node:timers/promises";
import { promisify } from "node:util";
import { ListMultipartUploadsCommand, ListObjectsV2Command, S3Client } from "@aws-sdk/client-s3";
import { beforeAll, describe, expect, inject, test } from "vitest";
import { TwinpassError } from "@/lib/errors";
import { newStagingKey, partKey } from "@/storage/keys";
import { openStore } from "@/storage/open";
import { PART_BYTES } from "@/storage/port";
import type { S3Config } from "@/storage/s3";
import {
  declarationOf,
  MIB,
  readAll,
  sendParts,
  sha256Of,
  sourceOf,
  uploadBytes,
} from "@/tests/support/store-bytes";
import { describeStoreContract } from "@/tests/support/store-contract";
import { createBucket, type StoreHarness } from "@/tests/support/store-harness";

declare module "vitest" {
  interface ProvidedContext {
    outsideS3: { config: S3Config; folder: string };
  }
}

const { config, folder } = inject("outsideS3");
const client = new S3Client({ ...config, credentials: config, requestChecksumCalculation: "WHEN_REQUIRED" });
const Bucket = config.bucket;

async function rawNames(): Promise<string[]> {
  const names: string[] = [];
  let StartAfter: string | undefined;
  do {
    const page = await client.send(new ListObjectsV2Command({ Bucket, StartAfter }));
    names.push(...(page.Contents ?? []).map(({ Key }) => Key ?? ""));
    StartAfter = page.IsTruncated ? names.at(-1) : undefined;
  } while (StartAfter !== undefined);
  return names;
}

async function outsideHarness(): Promise<StoreHarness> {
  return {
    store: await openStore(config),
    config,
    // Documented exception: this server answers 501 to If-None-Match on PUT, so the driver looks before it writes.
    conditionalCreate: "none",
    follow: async (url, method = "GET") => await fetch(url, { method }),
    pass: async (ms) => await sleep(ms),
    rawNames,
    unfinished: async () => {
      const { Uploads } = await client.send(new ListMultipartUploadsCommand({ Bucket }));
      return Uploads?.length ?? 0;
    },
    close: async () => undefined,
  };
}

beforeAll(async () => {
  await createBucket(config);
});

describeStoreContract("outside S3", outsideHarness, 300_000);

describe("outside S3 store killed with SIGKILL", { timeout: 300_000 }, () => {
  const script = async (command: string) => {
    await promisify(execFile)(process.execPath, ["docker-less-setup/outside-s3.mjs", command, folder]);
  };

  test("keeps what it acknowledged, shows nothing half done, and the upload goes on", async () => {
    const store = await openStore(config);
    const acknowledged: { key: Parameters<typeof store.get>[0]; sha256: string }[] = [];
    const staging = newStagingKey("crash");
    const half = randomBytes(2 * PART_BYTES);
    await sendParts(store, staging, half);
    const large = randomBytes(40 * MIB);
    const { key: largeKey, declared } = declarationOf("crash", large);
    let failure: unknown;
    const writer = (async () => {
      for (;;) {
        const { key, sha256 } = await uploadBytes(store, "crash", randomBytes(3 * MIB));
        acknowledged.push({ key, sha256 });
      }
    })().catch((error: unknown) => {
      failure = error;
    });
    const multipart = store.create(largeKey, slowly(large), declared).catch((error: unknown) => error);
    await sleep(2500);
    await script("kill");
    await writer;
    expect(failure).toBeInstanceOf(TwinpassError);
    expect(await multipart).toBeInstanceOf(TwinpassError);
    await script("up");
    expect(acknowledged.length).toBeGreaterThan(0);
    for (const { key, sha256 } of acknowledged) expect(sha256Of(await readAll(store, key))).toBe(sha256);
    for (const offset of [0, PART_BYTES]) {
      const part = half.subarray(offset, offset + PART_BYTES);
      expect((await readAll(store, partKey(staging, offset))).equals(part)).toBe(true);
    }
    await expect(store.stat(largeKey)).rejects.toMatchObject({ code: "object_not_found" });
    expect(await store.removeUnfinished(Date.now() + 60_000)).toBeGreaterThan(0);
    expect(await store.create(largeKey, sourceOf(large), declared)).toBe("created");
  });
});

/** A sender on a slow line: the server dies before its last part. */
async function* slowly(bytes: Uint8Array): AsyncGenerator<Uint8Array> {
  for await (const chunk of sourceOf(bytes, MIB)) {
    yield chunk;
    await sleep(150);
  }
}
