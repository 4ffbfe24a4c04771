import { chmod, rm, utimes, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { newStagingKey } from "@/storage/keys";
import { type BlobRow, type SweepRows, sweepStore } from "@/storage/sweep";
import { faultyStore } from "@/tests/support/faulty-store";
import { declarationOf, keysOf, sendParts, sourceOf } from "@/tests/support/store-bytes";
import { filesystemHarness, type StoreHarness } from "@/tests/support/store-harness";

const HOUR_MS = 3_600_000;
const NOW_MS = Date.now();
const NOTHING = {
  stagingRemoved: 0,
  unfinishedRemoved: 0,
  orphansRemoved: 0,
  orphansWaiting: 0,
  rowsChecked: 0,
  rowWithoutObject: [],
  digestMismatch: [],
};

/** Rows in memory, standing in for the table. */
class Rows implements SweepRows {
  rows: BlobRow[] = [];
  held = new Set<string>();
  /** Runs between the first look and the locked one. */
  beforeLock = () => undefined as void | Promise<void>;

  async *all() {
    yield* [...this.rows];
  }
  async kept(workspaceId: string, sha256s: readonly string[]) {
    const has = (sha256: string) =>
      this.held.has(sha256) ||
      this.rows.some((row) => row.workspaceId === workspaceId && row.sha256 === sha256);
    return new Set(sha256s.filter(has));
  }
  async removeIfUnkept(workspaceId: string, sha256: string, remove: () => Promise<void>) {
    await this.beforeLock();
    if ((await this.kept(workspaceId, [sha256])).size === 0) await remove();
  }
}

describe("sweep", () => {
  let harness: StoreHarness;
  let rows: Rows;
  beforeEach(async () => {
    harness = await filesystemHarness();
    rows = new Rows();
  });
  afterEach(async () => {
    await harness.close();
  });
  const pathOf = (key: string) => join((harness.config as { root: string }).root, key);
  const sweep = (store = harness.store, rehash = true) => sweepStore(store, rows, { nowMs: NOW_MS, rehash });
  async function blob(text: string, options: { hoursOld?: number; row?: boolean } = {}) {
    const workspaceId = "w";
    const bytes = Buffer.from(text);
    const { key, sha256, declared } = declarationOf(workspaceId, bytes);
    await harness.store.create(key, sourceOf(bytes), declared);
    const row = { workspaceId, sha256, sizeBytes: bytes.length };
    if (options.row !== false) rows.rows.push(row);
    await age(key, options.hoursOld ?? 0);
    return { key, row };
  }
  async function age(key: string, hours: number) {
    const seconds = (NOW_MS - hours * HOUR_MS) / 1000;
    await utimes(pathOf(key), seconds, seconds);
  }

  test("finds nothing to do in a sound store", async () => {
    await blob("one", { hoursOld: 1000 });
    await blob("two");
    expect(await sweep()).toEqual({ ...NOTHING, rowsChecked: 2 });
  });

  test("deletes an upload 24 h after its newest part, not before", async () => {
    const [old, young] = [newStagingKey("w"), newStagingKey("w")];
    for (const staging of [old, young]) {
      await sendParts(harness.store, staging, Buffer.alloc(8 * 1024 * 1024 + 1));
      for (const key of await keysOf(harness.store, "w")) if (key.startsWith(staging)) await age(key, 30);
    }
    const parts = (await keysOf(harness.store, "w")).filter((key) => key.startsWith(young));
    await age(parts[1] ?? "", 23.9);
    expect(await sweep()).toEqual({ ...NOTHING, stagingRemoved: 1 });
    expect(await keysOf(harness.store, "w")).toEqual(parts);
  });

  test("deletes a blob without a row after 48 h, not before, and none with a row or a hold", async () => {
    const kept = await blob("has a row", { hoursOld: 49 });
    const waiting = await blob("about to get its row", { hoursOld: 47.9, row: false });
    const held = await blob("held", { hoursOld: 49, row: false });
    rows.held.add(held.row.sha256);
    await blob("orphan", { hoursOld: 49, row: false });
    expect(await sweep()).toEqual({ ...NOTHING, rowsChecked: 1, orphansRemoved: 1, orphansWaiting: 1 });
    const left = [kept.key, waiting.key, held.key].sort();
    expect(await keysOf(harness.store, "w")).toEqual(left);
  });

  test("spares a blob that got its row between the first and the locked look", async () => {
    const orphan = await blob("adopted", { hoursOld: 49, row: false });
    rows.beforeLock = () => {
      rows.rows.push(orphan.row);
    };
    expect(await sweep()).toEqual({ ...NOTHING, rowsChecked: 1 });
    expect(await keysOf(harness.store, "w")).toEqual([orphan.key]);
  });

  test("spares a blob that was written anew between the list and the locked look", async () => {
    const orphan = await blob("fresh again", { hoursOld: 49, row: false });
    rows.beforeLock = () => age(orphan.key, 0);
    expect(await sweep()).toEqual(NOTHING);
    expect(await keysOf(harness.store, "w")).toEqual([orphan.key]);
  });

  test("reports one flipped byte and one deleted blob, each by name, and mends neither", async () => {
    await blob("sound");
    const damaged = await blob("flipped");
    const missing = await blob("deleted");
    await chmod(pathOf(damaged.key), 0o600);
    await writeFile(pathOf(damaged.key), "flopped");
    await rm(pathOf(missing.key));
    const report = await sweep();
    expect(report.rowWithoutObject).toEqual([missing.row]);
    expect(report.digestMismatch).toHaveLength(1);
    expect(report.digestMismatch[0]?.row).toEqual(damaged.row);
    expect(report.digestMismatch[0]?.found.sha256).not.toBe(damaged.row.sha256);
    expect(report.rowsChecked).toBe(3);
    expect(await keysOf(harness.store, "w")).toContain(damaged.key);
    // Without reading every byte only sizes are compared: the flip is not seen, a cut is.
    expect((await sweep(harness.store, false)).digestMismatch).toEqual([]);
    await writeFile(pathOf(damaged.key), "flop");
    expect((await sweep(harness.store, false)).digestMismatch).toEqual([
      { row: damaged.row, found: { sizeBytes: 4, sha256: undefined } },
    ]);
  });

  test("does not alarm for a row that was deleted meanwhile", async () => {
    const { key, row } = await blob("going");
    await harness.store.remove(key);
    rows.kept = async () => new Set();
    expect(await sweep()).toMatchObject({ rowsChecked: 1, rowWithoutObject: [] });
    expect(row.sizeBytes).toBe(5);
  });

  test("does not trust a list that lags: a hidden blob with a row is no loss", async () => {
    const { row } = await blob("hidden");
    const { store } = faultyStore(harness.store, { hiddenFromList: (key) => key.endsWith(row.sha256) });
    expect(await sweep(store)).toEqual({ ...NOTHING, rowsChecked: 1 });
  });

  test("passes a failing store on, at any call, and deletes nothing that has a row", async () => {
    const kept = await blob("kept", { hoursOld: 100 });
    for (let failCall = 1; ; failCall++) {
      await blob("orphan", { hoursOld: 100, row: false });
      const { store, calls } = faultyStore(harness.store, { failCall });
      const outcome = await sweep(store).catch((error: Error) => error.message);
      expect(await keysOf(harness.store, "w")).toContain(kept.key);
      if (calls.length < failCall) break;
      expect(outcome).toMatch(/^injected failure/);
    }
  });
});
