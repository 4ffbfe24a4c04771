import { createHash } from "node:crypto";
import { Readable } from "node:stream";
import { gzipSync } from "node:zlib";
import { describe, expect, it, vi } from "vitest";
import { FileRefusedError, UnavailableError } from "@/lib/errors";
import { readStoredLog } from "@/lib/services/runs/read-stored-log";
import { randomStream } from "@/lib/signal/random";
import type { ObjectStore } from "@/storage/port";

const PIECE = 65_536;
const random = randomStream(5, 0);
/** Values that pack badly, so that the packed file is over the mebibyte that settles its form. */
const log = Buffer.from(
  `time [s],gps speed [km/h]\n${Array.from(
    { length: 300_000 },
    (_, i) => `${(i / 100).toFixed(2)},${random.nextBelow(1e9)}`,
  ).join("\n")}`,
);

/** Reads `stored` as what was kept under the fingerprint of `kept`: the code of a refusal or of an error. */
async function outcome(kept: Uint8Array, stored: Uint8Array, options = {}): Promise<string> {
  const pieces = Array.from({ length: Math.ceil(stored.length / PIECE) }, (_, k) =>
    stored.subarray(k * PIECE, (k + 1) * PIECE),
  );
  const get = async () => ({
    body: Readable.from(pieces),
    sizeBytes: stored.length,
    totalBytes: stored.length,
  });
  const store = { get } as unknown as ObjectStore;
  const sha256 = createHash("sha256").update(kept).digest("hex");
  const where = { store, workspaceId: "3f0e0d7c-8d4c-4a54-9d0e-0a8f9b6b1c11" };
  try {
    const read = await readStoredLog(where, { sha256, sizeBytes: stored.length }, options);
    return read instanceof FileRefusedError ? read.code : `${read.rowsRead} rows`;
  } catch (error) {
    if (error instanceof UnavailableError) return error.code;
    throw error;
  }
}
const changed = (bytes: Uint8Array, at: number) => {
  const other = Uint8Array.from(bytes);
  other[at] ^= 0x55;
  return other;
};

describe("a stored log counts only when all its bytes have their fingerprint", { timeout: 60_000 }, () => {
  const packed = gzipSync(log);
  const padded = Buffer.concat([packed, Buffer.alloc(3 * PIECE)]);
  it("sound bytes are read, also with the zeros behind them that some tools pad with", async () => {
    expect(packed.length).toBeGreaterThan((1 << 20) + PIECE);
    const warned = vi.spyOn(process, "emitWarning");
    expect(await outcome(log, log)).toBe("300000 rows");
    expect(await outcome(padded, padded)).toBe("300000 rows");
    // Node warns when listeners pile up on the unpacker, one a piece.
    expect(warned).not.toHaveBeenCalled();
    warned.mockRestore();
  });
  it("a byte changed behind the end of a packed log is found", async () => {
    expect(await outcome(padded, changed(padded, padded.length - 1))).toBe("integrity_failed");
  });
  it("a byte changed in the last piece is told as that, never as a damaged file", async () => {
    const at = packed.length - (packed.length % PIECE) + 2;
    for (let k = 0; k < 8; k++)
      expect(await outcome(packed, changed(packed, Math.min(packed.length - 1, at + k)))).toBe(
        "integrity_failed",
      );
  });
  it("a refusal for its size waits for the fingerprint too", async () => {
    const options = { maxInflatedBytes: 2 << 20 };
    expect(await outcome(packed, packed, options)).toBe("inflates_too_large");
    expect(await outcome(packed, changed(packed, packed.length - 1), options)).toBe("integrity_failed");
  });
});
