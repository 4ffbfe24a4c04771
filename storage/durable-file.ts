import { randomUUID } from "node:crypto";
import { type FileHandle, link, mkdir, open, unlink } from "node:fs/promises";
import { dirname, join } from "node:path";
import { NotFoundError, OutOfSpaceError, TwinpassError, UnavailableError } from "@/lib/errors";
import type { ByteSource, CreateOutcome } from "@/storage/port";

const errnoOf = (error: unknown): string | undefined =>
  error instanceof Error && "code" in error && typeof error.code === "string" ? error.code : undefined;

/** True for an error of the operating system with this code, e.g. ENOENT. */
export function isErrno(error: unknown, ...codes: string[]): boolean {
  return codes.includes(errnoOf(error) ?? "");
}

/** Turns an error of the operating system into one of ours; ours pass through. The original is in `cause`. */
export function fileError(error: unknown): TwinpassError {
  if (error instanceof TwinpassError) return error;
  const typed = isErrno(error, "ENOSPC", "EDQUOT")
    ? new OutOfSpaceError(
        "store_full",
        "The file store has no room left. Nothing was stored; free space and try again.",
      )
    : new UnavailableError(
        "store_unavailable",
        `The file store can't be used (${errnoOf(error) ?? "unknown cause"}). Try again; if it stays so, check the store's folder.`,
      );
  typed.cause = error;
  return typed;
}

/** As fileError for reading, where a missing file is a NotFoundError. */
export function readError(error: unknown): TwinpassError {
  if (!isErrno(error, "ENOENT", "ENOTDIR", "ELOOP")) return fileError(error);
  return new NotFoundError("object_not_found", "The file is not in the store.");
}

/** Flushes names, not contents: without it a new file can be gone after a power cut. */
async function flushFolder(folder: string): Promise<void> {
  const handle = await open(folder, "r");
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

async function writeAll(handle: FileHandle, source: ByteSource): Promise<void> {
  for await (const chunk of source) {
    let written = 0;
    while (written < chunk.byteLength) {
      written += (await handle.write(chunk, written, chunk.byteLength - written)).bytesWritten;
    }
  }
}

/** Writes files that are either whole and durable under their name, or not there. One for each root folder. */
export class DurableFolder {
  readonly #durable = new Set<string>();

  constructor(
    private readonly root: string,
    readonly temporary: string = join(root, "tmp"),
  ) {}

  /** Makes a folder and everything above it up to the root, each flushed into its parent. */
  async #ensure(folder: string, remember: boolean): Promise<void> {
    if (this.#durable.has(folder)) return;
    const parent = dirname(folder);
    if (folder === this.root) {
      await mkdir(folder, { recursive: true, mode: 0o700 });
    } else {
      await this.#ensure(parent, true);
      await mkdir(folder, { mode: 0o700 }).catch((error) => {
        if (!isErrno(error, "EEXIST")) throw error;
      });
    }
    // Also where it was there already: whoever made it may not have flushed yet.
    await flushFolder(parent);
    if (remember) this.#durable.add(folder);
  }

  async #name(temporary: string, path: string, passing: boolean): Promise<CreateOutcome> {
    for (let attempt = 1; ; attempt++) {
      await this.#ensure(dirname(path), !passing);
      try {
        await link(temporary, path);
        return "created";
      } catch (error) {
        if (isErrno(error, "EEXIST")) return "existed";
        // The folder went away in between: a sweep removed it empty, or somebody wiped the root.
        if (!isErrno(error, "ENOENT") || attempt === 3) throw error;
        this.#durable.clear();
      }
    }
  }

  /**
   * Writes a temporary file, flushes it, gives it its name with link(2) - which fails where the name is taken -
   * and flushes the folder. A failed flush fails the request; it is never tried again on the same descriptor,
   * because a second one may report success over lost data.
   * @param passing the folder comes and goes (one upload), so nothing is remembered about it
   */
  async create(path: string, source: ByteSource, passing: boolean): Promise<CreateOutcome> {
    let temporary: string | undefined;
    try {
      await this.#ensure(this.temporary, true);
      temporary = join(this.temporary, randomUUID());
      const handle = await this.#openNew(temporary);
      try {
        await writeAll(handle, source);
        await handle.sync();
      } finally {
        await handle.close();
      }
      const outcome = await this.#name(temporary, path, passing);
      await flushFolder(dirname(path));
      return outcome;
    } catch (error) {
      throw fileError(error);
    } finally {
      if (temporary !== undefined) await unlink(temporary).catch(() => undefined);
    }
  }

  async #openNew(path: string): Promise<FileHandle> {
    return await open(path, "wx", 0o400).catch(async (error) => {
      if (!isErrno(error, "ENOENT")) throw error;
      this.#durable.clear();
      await this.#ensure(this.temporary, true);
      return await open(path, "wx", 0o400);
    });
  }
}
