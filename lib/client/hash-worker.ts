import { sha256 } from "@noble/hashes/sha2.js";
import { bytesToHex } from "@noble/hashes/utils.js";

const CHUNK_BYTES = 4 * 1024 * 1024;

/** Hashes a file piece by piece, away from the page; answers with progress and at last the digest. */
self.onmessage = async ({ data: file }: MessageEvent<Blob>) => {
  try {
    const hash = sha256.create();
    for (let from = 0; from < file.size; from += CHUNK_BYTES) {
      hash.update(new Uint8Array(await file.slice(from, from + CHUNK_BYTES).arrayBuffer()));
      self.postMessage({ doneBytes: Math.min(file.size, from + CHUNK_BYTES) });
    }
    self.postMessage({ digest: bytesToHex(hash.digest()) });
  } catch {
    self.postMessage({
      failure: "This file can't be read any more. Was it moved or is it open elsewhere? Choose it again.",
    });
  }
};
