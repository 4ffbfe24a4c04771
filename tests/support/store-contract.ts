import { spawn } from "node:child_process";
import { randomBytes } from "node:crypto";
import { createInterface } from "node:readline";
import { setTimeout as sleep } from "node:timers/promises";
import { fileURLToPath } from "node:url";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { InvalidInputError, NotFoundError, TooLargeError } from "@/lib/errors";
import { hashBlob } from "@/storage/blob";
import { blobKey, newStagingKey, type ObjectKey, partKey, prefixOf } from "@/storage/keys";
import { PART_BYTES } from "@/storage/port";
import {
  declarationOf,
  discard,
  keysOf,
  MIB,
  promote,
  readAll,
  sendParts,
  sha256Of,
  sourceOf,
  uploadBytes,
} from "@/tests/support/store-bytes";
import type { StoreHarness } from "@/tests/support/store-harness";

const SIZES = [0, 1, MIB, PART_BYTES - 1, PART_BYTES, PART_BYTES + 1, 10 * MIB - 1, 10 * MIB + 1, 64 * MIB];
const HOSTILE = [
  "ws/w/blob/../../../../outside",
  `ws/../../${"a".repeat(64)}`,
  `ws/w/blob/%2e%2e%2f${"a".repeat(55)}`,
  `ws/w/blob/${"a".repeat(63)}\0`,
  `ws/w/blob/${"a".repeat(64)}\n`,
  `ws/w/blob/${"A".repeat(64)}`,
  `ws/w/blob/${"a".repeat(4096)}`,
  `ws/${"w".repeat(4096)}/blob/${"a".repeat(64)}`,
  `/ws/w/blob/${"a".repeat(64)}`,
  `ws\\w\\blob\\${"a".repeat(64)}`,
  `ws/W%00/blob/${"a".repeat(64)}`,
  "ws/w/staging/../blob/x",
  "CON",
  "",
];

/** What every driver must do, in the numbers of the contract. One store for the whole run. */
export function describeStoreContract(
  name: string,
  open: () => Promise<StoreHarness>,
  timeout = 120_000,
): void {
  describe(`${name} store`, { timeout }, () => {
    let harness: StoreHarness;
    beforeAll(async () => {
      harness = await open();
    });
    afterAll(async () => {
      await harness.close();
    });

    test("says what it can do", async () => {
      const { driver } = harness.config;
      const signedLinks = driver === "s3" ? "store" : "route";
      const { conditionalCreate } = harness;
      expect(await harness.store.check()).toEqual({ driver, conditionalCreate, signedLinks });
      expect(await harness.rawNames()).not.toContainEqual(expect.stringMatching(/probe\/./));
    });

    test.each(SIZES)(
      "C1 gives back %i bytes as they were sent, through parts and final key",
      async (size) => {
        const bytes = randomBytes(size);
        const { key, outcome, sizeBytes, staging } = await uploadBytes(harness.store, "c1", bytes);
        expect({ outcome, sizeBytes }).toEqual({ outcome: "created", sizeBytes: size });
        expect(sha256Of(await readAll(harness.store, key))).toBe(sha256Of(bytes));
        expect((await harness.store.stat(key)).sizeBytes).toBe(size);
        await discard(harness.store, staging);
        expect(await keysOf(harness.store, "c1")).not.toContainEqual(expect.stringContaining("/staging/"));
      },
    );

    test("C2 leaves a taken key as it is", async () => {
      const key = partKey(newStagingKey("c2"), 0);
      const [first, second] = [Buffer.from("first"), Buffer.from("other bytes")];
      expect(await harness.store.create(key, sourceOf(first), { sizeBytes: 5 })).toBe("created");
      expect(await harness.store.create(key, sourceOf(second), { sizeBytes: 11 })).toBe("existed");
      expect(await readAll(harness.store, key)).toEqual(first);
      const large = randomBytes(PART_BYTES + 1);
      const { key: blob, declared } = declarationOf("c2", large);
      expect(await harness.store.create(blob, sourceOf(large), declared)).toBe("created");
      expect(await harness.store.create(blob, sourceOf(large), declared)).toBe("existed");
    });

    test("C3 lets one of 50 writers create; without atomic create, still one whole file", async () => {
      const key = partKey(newStagingKey("c3"), 0);
      const bodies = Array.from({ length: 50 }, () => randomBytes(3000));
      const outcomes = await Promise.all(
        bodies.map((body) => harness.store.create(key, sourceOf(body, 700), { sizeBytes: body.length })),
      );
      const winners = bodies.filter((_, index) => outcomes[index] === "created");
      if (harness.conditionalCreate === "atomic") expect(winners).toHaveLength(1);
      expect(winners).toContainEqual(await readAll(harness.store, key));
    });

    test.each([3000, PART_BYTES + 3000])(
      "C4, C11 refuse a wrong SHA-256 of %i bytes, nothing stays",
      async (size) => {
        const bytes = randomBytes(size);
        const { key, declared } = declarationOf("c4", bytes);
        bytes[size - 1] = (bytes[size - 1] ?? 0) ^ 1;
        const wrong = harness.store.create(key, sourceOf(bytes), declared);
        await expect(wrong).rejects.toMatchObject({ code: "digest_mismatch", status: 422 });
        await expect(harness.store.get(key)).rejects.toBeInstanceOf(NotFoundError);
        expect(await keysOf(harness.store, "c4")).toEqual([]);
        expect(await harness.unfinished()).toBe(0);
      },
    );

    test.each([2000, PART_BYTES + 2000])(
      "C5 refuses fewer, more and broken-off bytes of %i",
      async (size) => {
        const bytes = randomBytes(size);
        const { key, declared } = declarationOf("c5", bytes);
        async function* breaksOff() {
          yield* sourceOf(bytes.subarray(0, size - 1));
          throw new Error("connection reset");
        }
        async function* hangs() {
          yield* sourceOf(bytes.subarray(0, size - 1));
          await new Promise(() => undefined);
        }
        const { store } = harness;
        const short = store.create(key, sourceOf(bytes.subarray(1)), declared);
        await expect(short).rejects.toMatchObject({ code: "body_too_short" });
        const long = store.create(key, sourceOf(Buffer.concat([bytes, Buffer.from("!")])), declared);
        await expect(long).rejects.toBeInstanceOf(TooLargeError);
        const broken = store.create(key, breaksOff(), declared);
        await expect(broken).rejects.toMatchObject({ code: "body_interrupted" });
        const left = store.create(key, hangs(), declared, AbortSignal.timeout(300));
        await expect(left).rejects.toMatchObject({ code: "body_interrupted" });
        await expect(store.stat(key)).rejects.toBeInstanceOf(NotFoundError);
        expect(await keysOf(store, "c5")).toEqual([]);
        expect(await harness.unfinished()).toBe(0);
      },
    );

    test("C6 refuses every key that it did not make, and writes nowhere else", async () => {
      const { store } = harness;
      const before = await harness.rawNames();
      for (const text of HOSTILE) {
        const key = text as ObjectKey;
        const options = { expiresInSeconds: 60, contentType: "text/plain", contentDisposition: "attachment" };
        const tries = [
          () => store.create(key, sourceOf(Buffer.from("x")), { sizeBytes: 1 }),
          () => store.get(key),
          () => store.stat(key),
          () => store.remove(key),
          () => store.signedGet(key, options),
          () => store.list(`${text}/` as ReturnType<typeof prefixOf>),
        ];
        for (const attempt of tries) await expect(attempt()).rejects.toBeInstanceOf(InvalidInputError);
      }
      expect(await harness.rawNames()).toEqual(before);
    });

    test("C7, C9 show a put and a delete at once", async () => {
      const { store } = harness;
      for (let round = 0; round < 20; round++) {
        const bytes = randomBytes(100);
        const { key, declared } = declarationOf("c7", bytes);
        await store.create(key, sourceOf(bytes), declared);
        expect(await readAll(store, key)).toEqual(bytes);
        expect(await keysOf(store, "c7")).toEqual([key]);
        await store.remove(key);
        await expect(store.get(key)).rejects.toBeInstanceOf(NotFoundError);
        await expect(store.stat(key)).rejects.toBeInstanceOf(NotFoundError);
        await store.remove(key);
        expect(await keysOf(store, "c7")).toEqual([]);
      }
    });

    test("C8 lists more than 1,000 keys, once each and in order", async () => {
      const { store } = harness;
      const keys: string[] = [];
      const bodies = Array.from({ length: 1005 }, (_, index) => Buffer.from(`body ${index}`));
      const write = async () => {
        for (let body = bodies.pop(); body !== undefined; body = bodies.pop()) {
          const { key, declared } = declarationOf("c8", body);
          await store.create(key, sourceOf(body), declared);
          keys.push(key);
        }
      };
      await Promise.all(Array.from({ length: 16 }, write));
      keys.sort();
      const first = await store.list(prefixOf({ workspaceId: "c8", folder: "blob" }));
      expect(first.objects).toHaveLength(1000);
      expect(first.next).toBe(keys[999]);
      expect(await keysOf(store, "c8")).toEqual(keys);
      expect(await keysOf(store, "c8", 300)).toEqual(keys);
      expect((await store.list(prefixOf({ workspaceId: "c" }))).objects).toEqual([]);
    });

    test("C10 honours a signed link for one object, one method and its time only", async () => {
      const { store, follow, pass } = harness;
      const bytes = Buffer.from("the standing image");
      const other = Buffer.from("another image");
      const { key, declared } = declarationOf("c10", bytes);
      const { key: otherKey, declared: otherDeclared } = declarationOf("c10", other);
      await store.create(key, sourceOf(bytes), declared);
      await store.create(otherKey, sourceOf(other), otherDeclared);
      const headers = {
        contentType: "application/octet-stream",
        contentDisposition: 'attachment; filename="image.bin"',
      };
      const { url } = await store.signedGet(key, { expiresInSeconds: 60, ...headers });
      const good = await follow(url);
      expect(good.status).toBe(200);
      expect(good.headers.get("content-type")).toBe(headers.contentType);
      expect(good.headers.get("content-disposition")).toBe(headers.contentDisposition);
      expect(Buffer.from(await good.arrayBuffer())).toEqual(bytes);

      const at = url.indexOf("?");
      const [path, query] = [url.slice(0, at), new URLSearchParams(url.slice(at + 1))];
      const tampered = [url.replaceAll(sha256Of(bytes), sha256Of(other)), `${url}&more=1`, path];
      for (const [name, value] of query) {
        const [changed, missing] = [new URLSearchParams(query), new URLSearchParams(query)];
        changed.set(
          name,
          value.replace(/.$/, (last) => (last === "0" ? "1" : "0")),
        );
        missing.delete(name);
        tampered.push(`${path}?${changed}`, `${path}?${missing}`);
      }
      for (const link of tampered) {
        const { status } = await follow(link);
        expect([400, 403], link).toContain(status);
      }
      for (const method of ["PUT", "DELETE", "POST"]) {
        expect([400, 403, 501], method).toContain((await follow(url, method)).status);
      }
      expect(await readAll(store, key)).toEqual(bytes);
      const brief = await store.signedGet(key, { expiresInSeconds: 1, ...headers });
      await pass(2500);
      expect((await follow(brief.url)).status).toBe(403);
      for (const expiresInSeconds of [0, 61, 0.5]) {
        const refused = store.signedGet(key, { expiresInSeconds, ...headers });
        await expect(refused).rejects.toMatchObject({ code: "bad_link" });
      }
    });

    test("C12 gives ranges, and none that lies outside", async () => {
      const { store } = harness;
      const bytes = randomBytes(PART_BYTES + 1000);
      const { key, declared } = declarationOf("c12", bytes);
      await store.create(key, sourceOf(bytes), declared);
      const ranges = [
        [0, 0],
        [10, 19],
        [PART_BYTES - 5, PART_BYTES + 5],
        [bytes.length - 1, undefined],
        [5, bytes.length + 99],
      ] as const;
      for (const [firstByte, lastByte] of ranges) {
        const { body, sizeBytes, totalBytes } = await store.get(key, { range: { firstByte, lastByte } });
        const wanted = bytes.subarray(firstByte, lastByte === undefined ? undefined : lastByte + 1);
        const read = Buffer.concat(await body.toArray());
        expect(read.equals(wanted)).toBe(true);
        expect({ sizeBytes, totalBytes }).toEqual({ sizeBytes: wanted.length, totalBytes: bytes.length });
      }
      for (const range of [{ firstByte: bytes.length }, { firstByte: 5, lastByte: 4 }, { firstByte: -1 }]) {
        await expect(store.get(key, { range })).rejects.toMatchObject({ code: "range_outside" });
      }
      (await store.get(key)).body.destroy();
    });

    test("C13 keeps what it acknowledged and shows nothing half done when writers are killed", async () => {
      const { store, config } = harness;
      const acknowledged = new Map<string, number>();
      for (let round = 0; round < 4; round++) await killedWriter(config, round, acknowledged);
      expect(acknowledged.size).toBeGreaterThanOrEqual(3);
      const blobs = await store.list(prefixOf({ workspaceId: "killed", folder: "blob" }));
      const stored = new Map<string, number>();
      for (const { key } of blobs.objects) {
        const { sha256, sizeBytes } = await hashBlob(store, blobKey("killed", key.slice(-64)));
        expect(key.endsWith(sha256)).toBe(true);
        stored.set(sha256, sizeBytes);
      }
      expect(Object.fromEntries(stored)).toMatchObject(Object.fromEntries(acknowledged));
      await store.removeUnfinished(Date.now() + 60_000);
      expect(await harness.unfinished()).toBe(0);
    });

    test("makes one whole file where four senders send the same upload and three finish it", async () => {
      const { store } = harness;
      const bytes = randomBytes(9 * MIB);
      const staging = newStagingKey("four");
      await Promise.all(Array.from({ length: 4 }, () => sendParts(store, staging, bytes)));
      expect(await keysOf(store, "four")).toEqual([partKey(staging, 0), partKey(staging, PART_BYTES)]);
      const { key } = declarationOf("four", bytes);
      const finishes = Array.from({ length: 3 }, () => promote(store, staging, key, bytes.length));
      const created = (await Promise.all(finishes)).filter((outcome) => outcome === "created");
      if (harness.conditionalCreate === "atomic") expect(created).toHaveLength(1);
      expect(created.length).toBeGreaterThan(0);
      expect((await readAll(store, key)).equals(bytes)).toBe(true);
    });
  });
}

/** Starts a writer, kills it with SIGKILL in the upload after its first (round 0: in its first), notes what it said. */
async function killedWriter(config: object, round: number, acknowledged: Map<string, number>): Promise<void> {
  const script = fileURLToPath(new URL("./store-writer.ts", import.meta.url));
  const child = spawn(
    process.execPath,
    ["--no-warnings", "--import", "tsx", script, JSON.stringify(config)],
    {
      stdio: ["ignore", "pipe", "inherit"],
    },
  );
  const ended = new Promise((resolve) => child.once("close", resolve));
  let killing = false;
  for await (const line of createInterface(child.stdout)) {
    const [word, sha256, size] = line.split(" ");
    if (word === "stored" && sha256 !== undefined) acknowledged.set(sha256, Number(size));
    if (killing || word !== (round === 0 ? "begun" : "stored")) continue;
    killing = true;
    void sleep(50 + 100 * round).then(() => child.kill("SIGKILL"));
  }
  await ended;
}
