import { describe, expect, it } from "vitest";
import { CALIBRATION_READERS } from "@/tests/fuzz/calibration-seeds";
import { fuzzReader } from "@/tests/fuzz/fuzz-reader";

// The short form: fixed seed, some thousand files a reader. `npm run soak:calibration` goes on with other seeds for as long as it is told.
const FILES = 3000;

describe("a changed file is read soundly or refused plainly", { timeout: 240_000 }, () => {
  it.each(CALIBRATION_READERS)("%s", async (reader) => {
    const outcome = await fuzzReader({ reader, seed: 9, count: FILES, limitMs: 15_000 });
    expect(outcome.faults).toEqual([]);
    expect(outcome.inputs).toBe(FILES);
    expect(outcome.peakMb).toBeLessThan(300);
    // Both outcomes must occur, or the changes would be too tame or too wild to prove anything.
    expect(outcome.read).toBeGreaterThan(FILES / 50);
    // Damaged XML is one reason, whatever was damaged.
    expect(Object.keys(outcome.refused).length).toBeGreaterThan(reader === "values-file" ? 1 : 3);
  });
});
