import { createHash } from "node:crypto";
import { gzipSync } from "node:zlib";
import { describe, expect, it, vi } from "vitest";
import { FileRefusedError } from "@/lib/errors";
import { readLog } from "@/lib/logs/read-log";
import { readLogStream } from "@/lib/logs/read-log-stream";
import type { LogTable } from "@/lib/logs/types";

vi.setConfig({ testTimeout: 30_000 });

/** A table with its numbers as a digest: equal means equal to the last bit. */
function told(table: LogTable) {
  const digest = (values: Float64Array) => createHash("sha256").update(values).digest("hex");
  const channels = table.channels.map((channel) => ({ ...channel, values: digest(channel.values) }));
  return { ...table, timeS: digest(table.timeS), channels };
}

const PIECE = 65_536;
async function* inPieces(bytes: Uint8Array, failAfter = Number.POSITIVE_INFINITY) {
  for (let at = 0; at < bytes.length; at += PIECE) {
    if (at >= failAfter) throw new Error("the store went away");
    yield new Uint8Array(bytes.subarray(at, at + PIECE));
  }
}
/** 60,000 rows: over the first megabyte, so that most rows are read as they arrive. */
const log = Buffer.from(
  `time [s],gps speed [km/h],engine speed [1/min],text\n${Array.from(
    { length: 60_000 },
    (_, i) => `${(i / 100).toFixed(2)},${(20 + (i % 500) / 10).toFixed(1)},${1000 + (i % 700)},"n, ${i}"`,
  ).join("\n")}`,
);
const outcome = (work: Promise<unknown>) =>
  work.then(
    () => "read",
    (error) => (error instanceof FileRefusedError ? error.code : `error: ${(error as Error).message}`),
  );

describe("a log read as it arrives", () => {
  it("gives the table that the whole file gives", async () => {
    const table = await readLogStream(inPieces(log), log.length);
    expect(table.rowsRead).toBe(60_000);
    expect(table.channels[1].values[59_999]).toBe(1000 + (59_999 % 700));
    expect(told(table)).toEqual(told(readLog(log)));
    // Whether its size is known matters for memory only.
    expect(told(await readLogStream(inPieces(log), null))).toEqual(told(table));
  });
  it("takes the form from the same bytes, wherever the pieces end", async () => {
    const odd = Buffer.from(log);
    // The first letter that is no UTF-8 lies behind the first mebibyte, but in the piece in which that ends.
    odd[odd.indexOf("n, ", (1 << 20) + 100)] = 0xe9;
    async function* uneven() {
      for (let at = 0; at < odd.length; at += 700_000) yield new Uint8Array(odd.subarray(at, at + 700_000));
    }
    expect(told(await readLogStream(uneven(), odd.length))).toEqual(told(readLog(odd)));
  });
  it("unpacks on the way", async () => {
    expect(told(await readLogStream(inPieces(gzipSync(log)), null))).toEqual(told(readLog(log)));
  });
  it("reads a small file too", async () => {
    const small = log.subarray(0, 2000);
    expect(told(await readLogStream(inPieces(small), small.length))).toEqual(told(readLog(small)));
  });
  it.each([
    ["an empty file", new Uint8Array(), "empty_file"],
    ["a file packed twice", gzipSync(gzipSync(log)), "format_not_supported"],
    ["a packed file cut short", gzipSync(log).subarray(0, 200_000), "gzip_damaged"],
    ["a damaged packed file", gzipSync(log).fill(7, 1000, 1100), "gzip_damaged"],
    ["a file that is no text", new Uint8Array(2 << 20), "not_text"],
  ])("%s is refused as the whole one is", async (_, bytes, code) => {
    expect(await outcome(readLogStream(inPieces(bytes), bytes.length))).toBe(code);
    expect(await outcome((async () => readLog(bytes))())).toBe(code);
  });
  it("stops unpacking at the limit: 64 MiB of blanks in 64 KiB", async () => {
    const bomb = gzipSync(Buffer.concat([log, Buffer.alloc(64 << 20, 0x20)]));
    const options = { maxInflatedBytes: 8 << 20 };
    expect(await outcome(readLogStream(inPieces(bomb), bomb.length, options))).toBe("inflates_too_large");
  });
  it("passes on what the source throws, packed or plain", async () => {
    const packed = gzipSync(log, { level: 1 });
    for (const bytes of [log, packed]) {
      const failed = await outcome(readLogStream(inPieces(bytes, 2 * PIECE), bytes.length));
      expect(failed).toBe("error: the store went away");
    }
  });
});
