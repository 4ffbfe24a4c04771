import { randomBytes } from "node:crypto";
import {
  chmod,
  type FileHandle,
  mkdir,
  open,
  readdir,
  rm,
  stat,
  symlink,
  utimes,
  writeFile,
} from "node:fs/promises";
import { dirname, join } from "node:path";
import { afterEach, beforeEach, describe, expect, test, vi } from "vitest";
import { InvalidInputError, NotFoundError, OutOfSpaceError, UnavailableError } from "@/lib/errors";
import { newStagingKey, partKey } from "@/storage/keys";
import { openStore } from "@/storage/open";
import { declarationOf, keysOf, readAll, sourceOf } from "@/tests/support/store-bytes";
import { filesystemHarness, type StoreHarness } from "@/tests/support/store-harness";

const BYTES = randomBytes(3000);
const { key: KEY, declared: DECLARED } = declarationOf("w", BYTES);

function systemError(code: string): Error {
  return Object.assign(new Error(`injected ${code}`), { code });
}

describe("filesystem store when the disk fails", () => {
  let harness: StoreHarness;
  let root: string;
  /** What every file descriptor of this process answers to write, sync and close. */
  let handles: FileHandle;
  beforeEach(async () => {
    harness = await filesystemHarness();
    root = (harness.config as { root: string }).root;
    const own = await open(import.meta.filename);
    handles = Object.getPrototypeOf(own) as FileHandle;
    await own.close();
  });
  afterEach(async () => {
    vi.restoreAllMocks();
    await harness.close();
  });
  const create = () => harness.store.create(KEY, sourceOf(BYTES), DECLARED);

  test("flushes the file before it has its name, and the folder after, before it answers", async () => {
    await harness.store.check();
    const steps: string[] = [];
    const sync = handles.sync;
    vi.spyOn(handles, "sync").mockImplementation(async function (this: FileHandle) {
      const isFolder = (await this.stat()).isDirectory();
      const named = await stat(join(root, KEY)).then(
        () => "named",
        () => "unnamed",
      );
      steps.push(`${isFolder ? "folder" : "file"} ${named}`);
      await sync.call(this);
    });
    await create();
    steps.push("answered");
    const fileAt = steps.indexOf("file unnamed");
    expect(fileAt).toBeGreaterThanOrEqual(0);
    expect(steps.slice(-2)).toEqual(["folder named", "answered"]);
    expect(steps.filter((step) => step.startsWith("file"))).toHaveLength(1);
    expect((await stat(join(root, KEY))).mode & 0o777).toBe(0o400);
  });

  test("fails the request when a flush fails, at any of them, and never flushes that descriptor again", async () => {
    const sync = handles.sync;
    let calls = 0;
    let failAt = 0;
    const failed = new Set<FileHandle>();
    vi.spyOn(handles, "sync").mockImplementation(async function (this: FileHandle) {
      expect(failed.has(this)).toBe(false);
      if (++calls === failAt) {
        failed.add(this);
        throw systemError("EIO");
      }
      await sync.call(this);
    });
    for (failAt = 1; ; failAt++) {
      calls = 0;
      const outcome = await create().catch((error: unknown) => error);
      if (calls < failAt) break;
      expect(outcome).toBeInstanceOf(UnavailableError);
      expect(await readdir(join(root, "tmp")).catch(() => [])).toEqual([]);
    }
    expect(failAt).toBeGreaterThan(3);
    expect(await readAll(harness.store, KEY)).toEqual(BYTES);
  });

  test.each(["ENOSPC", "EDQUOT"])("says that the store is full on %s and leaves nothing", async (code) => {
    vi.spyOn(handles, "write").mockRejectedValue(systemError(code));
    await expect(create()).rejects.toBeInstanceOf(OutOfSpaceError);
    await expect(create()).rejects.toMatchObject({ status: 507, code: "store_full" });
    vi.restoreAllMocks();
    expect(await harness.unfinished()).toBe(0);
    expect(await keysOf(harness.store, "w")).toEqual([]);
    expect(await create()).toBe("created");
  });

  test("goes on where the system wrote only some of a chunk", async () => {
    const write = handles.write as (
      ...args: unknown[]
    ) => Promise<{ bytesWritten: number; buffer: Uint8Array }>;
    vi.spyOn(handles as { write: typeof write }, "write").mockImplementation(async function (
      this: unknown,
      ...args
    ) {
      const [buffer, offset, length] = args as [Uint8Array, number, number];
      return await write.call(this, buffer, offset, Math.min(length, 7));
    });
    await create();
    vi.restoreAllMocks();
    expect(await readAll(harness.store, KEY)).toEqual(BYTES);
  });

  test("reports a read error and a file that got shorter", async () => {
    await create();
    vi.spyOn(handles, "read").mockRejectedValueOnce(systemError("EIO"));
    await expect(readAll(harness.store, KEY)).rejects.toBeInstanceOf(UnavailableError);
    const { body } = await harness.store.get(KEY);
    await chmod(join(root, KEY), 0o600);
    await writeFile(join(root, KEY), "short");
    await expect(body.toArray()).rejects.toMatchObject({ code: "stored_bytes_short" });
  });

  test("closes every descriptor, read to the end or not", async () => {
    await create();
    const before = (await readdir("/proc/self/fd")).length;
    for (let n = 0; n < 20; n++) {
      await readAll(harness.store, KEY);
      (await harness.store.get(KEY)).body.destroy();
      await harness.store.get(KEY, { range: { firstByte: 9999 } }).catch(() => undefined);
      await harness.store.create(KEY, sourceOf(BYTES), DECLARED);
      await harness.store.create(KEY, sourceOf(BYTES.subarray(1)), DECLARED).catch(() => undefined);
    }
    await new Promise((resolve) => setTimeout(resolve, 50));
    expect((await readdir("/proc/self/fd")).length).toBeLessThanOrEqual(before + 1);
  });

  test("goes on after its folders were wiped, and after an upload's folder went away", async () => {
    await create();
    await rm(root, { recursive: true });
    expect(await create()).toBe("created");
    const staging = newStagingKey("w");
    await harness.store.create(partKey(staging, 0), sourceOf(BYTES), { sizeBytes: BYTES.length });
    await harness.store.remove(partKey(staging, 0));
    await expect(stat(join(root, staging))).rejects.toMatchObject({ code: "ENOENT" });
    const again = harness.store.create(partKey(staging, 0), sourceOf(BYTES), { sizeBytes: BYTES.length });
    expect(await again).toBe("created");
  });

  test("is refused where the root is not a folder, and does not follow a link out of it", async () => {
    await writeFile(join(root, "..", "plain"), "");
    const config = { driver: "filesystem", linkSecret: "s".repeat(32), linkPath: "/files" } as const;
    const broken = await openStore({ ...config, root: join(root, "..", "plain", "root") });
    await expect(broken.check()).rejects.toBeInstanceOf(UnavailableError);
    await expect(openStore({ ...config, root: "relative" })).rejects.toBeInstanceOf(InvalidInputError);
    await mkdir(dirname(join(root, KEY)), { recursive: true });
    await symlink(join(root, "..", "plain"), join(root, KEY));
    await expect(harness.store.get(KEY)).rejects.toBeInstanceOf(NotFoundError);
  });

  test("lists in the byte order of whole keys and leaves foreign names out", async () => {
    const workspaces = ["a", "a-b", "a0", "b"];
    for (const workspace of workspaces) {
      const { key, declared } = declarationOf(workspace, BYTES);
      await harness.store.create(key, sourceOf(BYTES), declared);
    }
    await writeFile(join(root, "ws/a/blob/notes.txt"), "");
    const keys = (await harness.store.list("ws/" as Parameters<typeof harness.store.list>[0])).objects.map(
      (o) => o.key,
    );
    const inByteOrder = ["a-b", "a", "a0", "b"];
    expect(keys).toEqual(inByteOrder.map((workspace) => declarationOf(workspace, BYTES).key));
  });

  test("clears old temporary files only", async () => {
    await create();
    for (const [name, ageSeconds] of [
      ["old", 90_000],
      ["young", 10],
    ] as const) {
      const path = join(root, "tmp", name);
      await writeFile(path, "left by a killed writer");
      const when = Date.now() / 1000 - ageSeconds;
      await utimes(path, when, when);
    }
    expect(await harness.store.removeUnfinished(Date.now() - 86_400_000)).toBe(1);
    expect(await readdir(join(root, "tmp"))).toEqual(["young"]);
  });
});
