import { gzipSync } from "node:zlib";
import { describe, expect, test } from "vitest";
import { FileRefusedError } from "@/lib/errors";
import { gatherHead, type LogHead } from "@/lib/logs/preview/gather-head";
import { previewLog } from "@/lib/logs/preview/preview-log";
import { readLog } from "@/lib/logs/read-log";
import { randomStream } from "@/lib/signal/random";
import { mutate } from "@/tests/fuzz/mutate";
import { READERS, seedFiles } from "@/tests/fuzz/seed-files";

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
