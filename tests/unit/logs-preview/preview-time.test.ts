import { expect, test } from "vitest";
import { gatherHead } from "@/lib/logs/preview/gather-head";
import { previewLog } from "@/lib/logs/preview/preview-log";
import { previewWords } from "@/lib/logs/preview/preview-words";
import { writtenLog } from "@/tests/bench/written-log";

/** What a tester waits at most for the findings of a log of 2 MB (the product's goal); the quickest of some rounds, machines are busy. */
const LIMIT_MS = 1000;
const ROUNDS = 3;

test("the findings of a log of 2 MB are there within a second", { timeout: 60_000 }, async () => {
  const blocks = [...writtenLog(2e6, { delimiter: ";", decimal: "," })];
  expect(Buffer.concat(blocks).length).toBeGreaterThanOrEqual(2e6);
  async function* arriving() {
    yield* blocks;
  }
  const spent: number[] = [];
  for (let round = 0; round < ROUNDS; round++) {
    const began = performance.now();
    const preview = previewLog(await gatherHead(arriving()), { drive: "FWD" });
    const { found } = previewWords(preview);
    spent.push(performance.now() - began);
    expect(preview.refusal).toBeNull();
    expect(preview.rowsRead).toBeGreaterThan(5000);
    expect(found).toEqual(expect.arrayContaining(["GPS speed", "engine speed", "lambda"]));
  }
  expect(Math.min(...spent)).toBeLessThan(LIMIT_MS);
});
