import { describe, expect, it } from "vitest";
import { fuzzReader } from "@/tests/fuzz/fuzz-reader";
import { READERS } from "@/tests/fuzz/seed-files";

// The short form: fixed seed, a few hundred files a reader. `npm run soak:logs` goes on with other seeds for as long as it is told.
const FILES = 300;

describe("a mutated log gives a table whose counts add up, or a plain refusal", { timeout: 240_000 }, () => {
  it.each(READERS)("%s", async (reader) => {
    const outcome = await fuzzReader({ reader, seed: 7, count: FILES, limitMs: 15_000 });
    expect(outcome.faults).toEqual([]);
    expect(outcome.inputs).toBe(FILES);
    expect(outcome.peakMb).toBeLessThan(400);
    // Both outcomes must occur, or the mutations would be too tame or too wild to prove anything.
    expect(outcome.read).toBeGreaterThan(FILES / 50);
    expect(Object.keys(outcome.refused).length).toBeGreaterThan(1);
  });
});
