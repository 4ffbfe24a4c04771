import { createHash } from "node:crypto";
import { NotFoundError, UnavailableError } from "@/lib/errors";
import { type BlobKey, checkedKey } from "@/storage/keys";
import type { CreateOutcome, ObjectStore } from "@/storage/port";

/** Reads a blob to its end. @returns its size and SHA-256 as stored now @throws NotFoundError, UnavailableError */
export async function hashBlob(
  store: Pick<ObjectStore, "get">,
  key: BlobKey,
  signal?: AbortSignal,
): Promise<{ sizeBytes: number; sha256: string }> {
  const { body, sizeBytes } = await store.get(key, { signal });
  const hash = createHash("sha256");
  for await (const chunk of body) hash.update(chunk);
  return { sizeBytes, sha256: hash.digest("hex") };
}

/**
 * Reads a blob back and compares it with its key, before anybody is told that it is stored.
 * @param options.outcome `created`: a wrong blob is ours alone - no row can cite it yet - and is removed,
 *   so that the next try can put it right. `existed`: it is left for people to look at.
 * @throws UnavailableError `stored_bytes_damaged`, `stored_bytes_gone`
 */
export async function verifyBlob(
  store: Pick<ObjectStore, "get" | "remove">,
  key: BlobKey,
  options: { sizeBytes: number; outcome: CreateOutcome; signal?: AbortSignal },
): Promise<void> {
  const parsed = checkedKey(key);
  const wanted = parsed.kind === "blob" ? parsed.sha256 : undefined;
  const stored = await hashBlob(store, key, options.signal).catch((error) => {
    if (!(error instanceof NotFoundError)) throw error;
    throw new UnavailableError(
      "stored_bytes_gone",
      "The file went away while it was being stored. Send it again.",
    );
  });
  if (stored.sizeBytes === options.sizeBytes && stored.sha256 === wanted) return;
  if (options.outcome === "created") await store.remove(key);
  throw new UnavailableError(
    "stored_bytes_damaged",
    "What the file store holds is not what was put in: the fingerprint differs. Nothing was confirmed; check the store.",
    { key },
  );
}
