import { constants, type Dirent } from "node:fs";
import { type FileHandle, lstat, open, readdir, rmdir, unlink } from "node:fs/promises";
import { dirname, isAbsolute, join } from "node:path";
import type { Readable } from "node:stream";
import { InvalidInputError, UnavailableError } from "@/lib/errors";
import { verifyBlob } from "@/storage/blob";
import { checkedSource } from "@/storage/checked-source";
import { DurableFolder, fileError, isErrno, readError } from "@/storage/durable-file";
import { checkedKey, checkedPrefix, type KeyPrefix, type ObjectKey, parseObjectKey } from "@/storage/keys";
import { checkedStream, declaredFor, pageLimit, rangeWithin } from "@/storage/object-checks";
import type { ByteRange, ListPage, ObjectStat, ObjectStore, StoredBytes } from "@/storage/port";
import { probeStore } from "@/storage/probe";
import { signLink } from "@/storage/signed-link";

export interface FilesystemConfig {
  driver: "filesystem";
  /** Absolute folder of our own; made when missing. Everything lies on one file system. */
  root: string;
  /** Key of the signed links, at least 32 characters. */
  linkSecret: string;
  /** Path of our route that answers signed links, e.g. "/api/files". */
  linkPath: string;
}

/** Children in the byte order of the keys they lead to: "a-b/" comes before "a/". */
async function sortedChildren(folder: string): Promise<{ name: string; isFolder: boolean }[]> {
  const entries = await readdir(folder, { withFileTypes: true }).catch((error): Dirent[] => {
    if (isErrno(error, "ENOENT", "ENOTDIR")) return [];
    throw error;
  });
  const sortName = (entry: Dirent) => (entry.isDirectory() ? `${entry.name}/` : entry.name);
  return entries
    .map((entry) => ({ name: sortName(entry), isFolder: entry.isDirectory() }))
    .sort((a, b) => (a.name < b.name ? -1 : 1));
}

async function* keysUnder(root: string, prefix: string, after: string): AsyncGenerator<string> {
  for (const child of await sortedChildren(join(root, prefix))) {
    const key = prefix + child.name;
    if (key <= after && !(child.isFolder && after.startsWith(key))) continue;
    if (child.isFolder) yield* keysUnder(root, key, after);
    else yield key;
  }
}

async function* fileBytes(handle: FileHandle, firstByte: number, sizeBytes: number): AsyncGenerator<Buffer> {
  try {
    const end = firstByte + sizeBytes;
    for (let position = firstByte; position < end; ) {
      const buffer = Buffer.allocUnsafe(Math.min(256 * 1024, end - position));
      const { bytesRead } = await handle.read(buffer, 0, buffer.length, position);
      if (bytesRead === 0) return;
      position += bytesRead;
      yield buffer.subarray(0, bytesRead);
    }
  } finally {
    await handle.close();
  }
}

class FilesystemStore implements ObjectStore {
  readonly #folder: DurableFolder;

  constructor(private readonly config: FilesystemConfig) {
    this.#folder = new DurableFolder(config.root);
  }

  #path(key: ObjectKey): string {
    return join(this.config.root, checkedKey(key).key);
  }

  async check() {
    const conditionalCreate = await probeStore(this);
    if (conditionalCreate === "none") {
      throw new UnavailableError(
        "store_overwrites",
        "The file store's folder overwrites names that are taken. Put it on a local file system that has hard links.",
      );
    }
    return { driver: "filesystem", conditionalCreate, signedLinks: "route" } as const;
  }

  async create(...[key, source, declared, signal]: Parameters<ObjectStore["create"]>) {
    const parsed = checkedKey(key);
    const expected = declaredFor(parsed, declared);
    const checked = checkedSource(source, expected, signal);
    const outcome = await this.#folder.create(this.#path(key), checked, parsed.kind === "part");
    if (parsed.kind === "blob") {
      await verifyBlob(this, parsed.key, { sizeBytes: expected.sizeBytes, outcome });
    }
    return outcome;
  }

  async stat(key: ObjectKey): Promise<ObjectStat> {
    const entry = await lstat(this.#path(key)).catch((error) => {
      throw readError(error);
    });
    return { sizeBytes: entry.size, modifiedAtMs: entry.mtimeMs };
  }

  async get(key: ObjectKey, options: { range?: ByteRange; signal?: AbortSignal } = {}): Promise<StoredBytes> {
    let handle: FileHandle | undefined;
    try {
      handle = await open(this.#path(key), constants.O_RDONLY | constants.O_NOFOLLOW);
      const totalBytes = (await handle.stat()).size;
      const { firstByte, sizeBytes } = rangeWithin(totalBytes, options.range);
      const source = fileBytes(handle, firstByte, sizeBytes);
      const body: Readable = checkedStream(source, sizeBytes, fileError, options.signal, () =>
        handle?.close(),
      );
      return { body, sizeBytes, totalBytes };
    } catch (error) {
      await handle?.close();
      throw readError(error);
    }
  }

  async remove(key: ObjectKey): Promise<void> {
    const path = this.#path(key);
    await unlink(path).catch((error) => {
      if (!isErrno(error, "ENOENT", "ENOTDIR")) throw fileError(error);
    });
    // The folder of an upload goes with its last part; others in use refuse and stay.
    if (checkedKey(key).kind === "part") await rmdir(dirname(path)).catch(() => undefined);
  }

  async list(prefix: KeyPrefix, options: { after?: string; limit?: number } = {}): Promise<ListPage> {
    const limit = pageLimit(options.limit);
    const objects: ListPage["objects"] = [];
    try {
      for await (const name of keysUnder(this.config.root, checkedPrefix(prefix), options.after ?? "")) {
        const key = parseObjectKey(name)?.key;
        if (key === undefined) continue;
        const last = objects.at(-1);
        if (objects.length === limit && last !== undefined) return { objects, next: last.key };
        const entry = await lstat(join(this.config.root, key)).catch((error) => {
          if (!isErrno(error, "ENOENT", "ENOTDIR")) throw error;
          return undefined; // deleted while we were listing
        });
        if (entry !== undefined) objects.push({ key, sizeBytes: entry.size, modifiedAtMs: entry.mtimeMs });
      }
    } catch (error) {
      throw fileError(error);
    }
    return { objects };
  }

  async signedGet(...[key, options]: Parameters<ObjectStore["signedGet"]>) {
    const { parameters, expiresAtMs } = signLink(this.config.linkSecret, key, options, Date.now());
    return { url: `${this.config.linkPath}?${parameters}`, expiresAtMs };
  }

  async removeUnfinished(olderThanMs: number): Promise<number> {
    const folder = this.#folder.temporary;
    let removed = 0;
    try {
      for (const { name, isFolder } of await sortedChildren(folder)) {
        const path = join(folder, name);
        const entry = isFolder ? undefined : await lstat(path).catch(() => undefined);
        if (entry === undefined || entry.mtimeMs >= olderThanMs) continue;
        await unlink(path);
        removed++;
      }
    } catch (error) {
      throw fileError(error);
    }
    return removed;
  }
}

/**
 * The embedded store: one file for each key under a root folder, named with link(2), flushed before it is acknowledged.
 * @throws InvalidInputError `bad_store_config` for a relative root
 */
export function filesystemStore(config: FilesystemConfig): ObjectStore {
  if (!isAbsolute(config.root)) {
    throw new InvalidInputError(
      "bad_store_config",
      "STORAGE_ROOT must be an absolute folder. Set it and start again.",
    );
  }
  return new FilesystemStore(config);
}
