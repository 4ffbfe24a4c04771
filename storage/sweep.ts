import { NotFoundError } from "@/lib/errors";
import { hashBlob } from "@/storage/blob";
import { type BlobKey, blobKey, parseObjectKey, prefixOf, type StagingKey } from "@/storage/keys";
import type { ListPage, ObjectStore } from "@/storage/port";

const HOUR_MS = 3_600_000;
const STAGING_AGE_MS = 24 * HOUR_MS;
const ORPHAN_AGE_MS = 48 * HOUR_MS;

export interface BlobRow {
  workspaceId: string;
  sha256: string;
  sizeBytes: number;
}

/** What the sweep asks the database. The store knows bytes, only rows know what is meant to be there. */
export interface SweepRows {
  /** All rows, in any order. */
  all(): AsyncIterable<BlobRow>;
  /** Which of these digests have a row in this workspace, or must be kept for another reason (a hold). */
  kept(workspaceId: string, sha256s: readonly string[]): Promise<ReadonlySet<string>>;
  /**
   * In a transaction that locks the digest: awaits `remove` if the digest still has no row and no hold.
   * The transaction that commits an upload takes the same lock and stats the blob before it writes the row;
   * so either it sees the blob gone, or the sweep sees the row.
   */
  removeIfUnkept(workspaceId: string, sha256: string, remove: () => Promise<void>): Promise<void>;
}

export interface SweepReport {
  /** Uploads whose newest part was older than 24 h. */
  stagingRemoved: number;
  /** Temporary files and open multipart uploads of killed writers. */
  unfinishedRemoved: number;
  orphansRemoved: number;
  /** Blobs without a row, younger than 48 h: an upload may be about to commit. */
  orphansWaiting: number;
  rowsChecked: number;
  /** Alarm at one. Never mended here. */
  rowWithoutObject: BlobRow[];
  /** Alarm at one. Never mended here. `found` is what the store holds. */
  digestMismatch: { row: BlobRow; found: { sizeBytes: number; sha256?: string } }[];
}

export interface SweepOptions {
  nowMs: number;
  /** Also read and hash every blob (nightly); else only sizes are compared (hourly). */
  rehash: boolean;
  signal?: AbortSignal;
}

async function* pages(store: ObjectStore): AsyncGenerator<ListPage["objects"]> {
  let after: string | undefined;
  do {
    const page = await store.list(prefixOf({}), { after });
    yield page.objects;
    after = page.next;
  } while (after !== undefined);
}

/** The list may be older than the store: the age is asked again before anything is deleted. */
async function removeIfOld(store: ObjectStore, key: BlobKey, nowMs: number): Promise<boolean> {
  try {
    if ((await store.stat(key)).modifiedAtMs > nowMs - ORPHAN_AGE_MS) return false;
    await store.remove(key);
    return true;
  } catch (error) {
    if (error instanceof NotFoundError) return false;
    throw error;
  }
}

async function sweepObjects(store: ObjectStore, rows: SweepRows, options: SweepOptions, report: SweepReport) {
  const uploads = new Map<StagingKey, { newestMs: number; parts: ListPage["objects"] }>();
  for await (const objects of pages(store)) {
    options.signal?.throwIfAborted();
    const digests = new Map<string, { sha256: string; key: BlobKey; modifiedAtMs: number }[]>();
    for (const object of objects) {
      const parsed = parseObjectKey(object.key);
      if (parsed?.kind === "part") {
        const upload = uploads.get(parsed.staging) ?? { newestMs: 0, parts: [] };
        upload.newestMs = Math.max(upload.newestMs, object.modifiedAtMs);
        upload.parts.push(object);
        uploads.set(parsed.staging, upload);
      } else if (parsed?.kind === "blob") {
        const { sha256, key } = parsed;
        const blobs = digests.get(parsed.workspaceId) ?? [];
        digests.set(parsed.workspaceId, [...blobs, { sha256, key, modifiedAtMs: object.modifiedAtMs }]);
      }
    }
    for (const [workspaceId, blobs] of digests) {
      const kept = await rows.kept(
        workspaceId,
        blobs.map((blob) => blob.sha256),
      );
      for (const { sha256, key, modifiedAtMs } of blobs.filter((blob) => !kept.has(blob.sha256))) {
        if (modifiedAtMs > options.nowMs - ORPHAN_AGE_MS) {
          report.orphansWaiting++;
          continue;
        }
        await rows.removeIfUnkept(workspaceId, sha256, async () => {
          if (await removeIfOld(store, key, options.nowMs)) report.orphansRemoved++;
        });
      }
    }
  }
  for (const { newestMs, parts } of uploads.values()) {
    if (newestMs > options.nowMs - STAGING_AGE_MS) continue;
    for (const { key } of parts) await store.remove(key);
    report.stagingRemoved++;
  }
}

async function found(store: ObjectStore, row: BlobRow, options: SweepOptions) {
  const key = blobKey(row.workspaceId, row.sha256);
  try {
    return options.rehash ? await hashBlob(store, key, options.signal) : await store.stat(key);
  } catch (error) {
    if (error instanceof NotFoundError) return undefined;
    throw error;
  }
}

async function checkRows(store: ObjectStore, rows: SweepRows, options: SweepOptions, report: SweepReport) {
  for await (const row of rows.all()) {
    options.signal?.throwIfAborted();
    report.rowsChecked++;
    // Asked by key, not by list: a list may lag behind.
    const stored = await found(store, row, options);
    if (stored === undefined) {
      // A row may be deleted between reading it and looking: rows go before objects.
      const still = await rows.kept(row.workspaceId, [row.sha256]);
      if (still.has(row.sha256)) report.rowWithoutObject.push(row);
      continue;
    }
    const sha256 = "sha256" in stored ? stored.sha256 : undefined;
    const differs = stored.sizeBytes !== row.sizeBytes || (sha256 !== undefined && sha256 !== row.sha256);
    if (differs) report.digestMismatch.push({ row, found: { sizeBytes: stored.sizeBytes, sha256 } });
  }
}

/**
 * Clears leftovers and looks for loss. Deletes only uploads older than 24 h and blobs older than 48 h that have no row,
 * the latter after a second look under a lock. A missing or damaged blob is reported and never touched.
 * @throws UnavailableError where the store fails; what was done by then stands, and the next sweep goes on
 */
export async function sweepStore(
  store: ObjectStore,
  rows: SweepRows,
  options: SweepOptions,
): Promise<SweepReport> {
  const report: SweepReport = {
    stagingRemoved: 0,
    unfinishedRemoved: await store.removeUnfinished(options.nowMs - STAGING_AGE_MS),
    orphansRemoved: 0,
    orphansWaiting: 0,
    rowsChecked: 0,
    rowWithoutObject: [],
    digestMismatch: [],
  };
  await sweepObjects(store, rows, options, report);
  await checkRows(store, rows, options, report);
  return report;
}
