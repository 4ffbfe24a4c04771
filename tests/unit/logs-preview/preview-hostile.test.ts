import { gzipSync } from "node:zlib";
import { describe, expect, test } from "vitest";
import { FileRefusedError } from "@/lib/errors";
import { gatherHead, type LogHead } from "@/lib/logs/preview/gather-head";
import { fingerprintOfHead } from "@/lib/logs/preview/header-fingerprint";
import { previewLog } from "@/lib/logs/preview/preview-log";
import { previewWords } from "@/lib/logs/preview/preview-words";
import { readLog } from "@/lib/logs/read-log";
import { randomStream } from "@/lib/signal/random";
import { mutate } from "@/tests/fuzz/mutate";
import { READERS, seedFiles } from "@/tests/fuzz/seed-files";
import { writeMdf } from "@/tests/support/mdf-writer";

const FILES = 60;

/** What the import makes of a file, in the words of the preview. */
function imported(bytes: Uint8Array): { refused: string | null; rows: number } {
  try {
    return { refused: null, rows: readLog(bytes).rowsRead };
  } catch (error) {
    if (error instanceof FileRefusedError) return { refused: error.code, rows: 0 };
    throw error;
  }
}

async function headOrRefusal(bytes: Uint8Array): Promise<LogHead | string> {
  async function* whole() {
    yield bytes;
  }
  try {
    return await gatherHead(whole());
  } catch (error) {
    if (error instanceof FileRefusedError) return error.code;
    throw error;
  }
}

describe("what a preview takes upon itself is less than what the worker may", () => {
  test("a small file whose channels share their bytes is not spread out in the web process", () => {
    const channels = Array.from({ length: 30 }, (_, k) => ({
      name: `c${k}`,
      dataType: 0,
      byteOffset: 8 + (k % 8),
      bitCount: 8,
    }));
    const time = { name: "t", unit: "s", type: 2, sync: 1, dataType: 4, byteOffset: 0, bitCount: 64 };
    const cycles = 200_000;
    const stream = new Uint8Array(16 * cycles);
    const view = new DataView(stream.buffer);
    for (let i = 0; i < cycles; i++) view.setFloat64(16 * i, i / 100, true);
    const bytes = writeMdf([{ groups: [{ channels: [time, ...channels], dataBytes: 16, cycles }], stream }]);
    expect(previewLog({ bytes, complete: true }, {}).refusal?.code).toBe("too_large_to_preview");
    expect(imported(bytes)).toEqual({ refused: null, rows: cycles });
  });
  test("what an MDF file holds beside its numbers is named as left out", () => {
    const bytes = seedFiles("mdf")[0];
    const { leftOut } = previewWords(previewLog({ bytes, complete: true }, {}));
    expect(leftOut).toEqual(expect.arrayContaining(["word", "map"]));
  });
  test("a log that can't be unpacked is told as that, not as an empty one", () => {
    const refusal = new FileRefusedError("gzip_damaged", "The packed log can't be unpacked.");
    const head = { bytes: new Uint8Array(), complete: true, refusal };
    const preview = previewLog(head, {});
    expect(preview.refusal).toEqual({ code: "gzip_damaged", message: refusal.message });
    expect(fingerprintOfHead(head)).toBeNull();
  });
});

describe("a mutated log is previewed as it is imported, never with another outcome", () => {
  test.each(READERS)("%s", { timeout: 120_000 }, async (reader) => {
    const files = seedFiles(reader);
    const outcomes = new Set<string>();
    for (let i = 0; i < FILES; i++) {
      const random = randomStream(23, i);
      const file = files[random.nextBelow(files.length)] ?? new Uint8Array();
      const other = files[random.nextBelow(files.length)] ?? new Uint8Array();
      const mutated = mutate(file, other, random);
      const bytes = reader === "gzip" ? new Uint8Array(gzipSync(mutated)) : mutated;
      const expected = imported(bytes);
      const head = await headOrRefusal(bytes);
      if (typeof head === "string") {
        expect(head).toBe(expected.refused);
        continue;
      }
      const preview = previewLog(head, {});
      outcomes.add(preview.refusal === null ? "read" : "refused");
      if (!head.complete) continue;
      expect(preview.refusal?.code ?? null, `file ${i}`).toBe(expected.refused);
      expect(preview.rowsRead).toBe(expected.rows);
      // What the page gets stays small, and is the same after JSON: no NaN, no typed array.
      expect(preview.rows.length).toBeLessThanOrEqual(20);
      expect(JSON.parse(JSON.stringify(preview))).toEqual(preview);
    }
    expect([...outcomes].sort()).toEqual(["read", "refused"]);
  });
});
