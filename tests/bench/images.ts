import { changedRanges } from "@/lib/calibration/image/changed-ranges";
import type { BenchLine } from "./line";

const SIZE = 8 * 1024 * 1024;
const before = Buffer.alloc(SIZE, 0x5a);
const after = Buffer.from(before);
const copy = Buffer.from(before);
for (let area = 0; area < 60; area += 1) after.fill(0xa5, area * 131_072, area * 131_072 + 32);
const image = (content: Buffer) => ({ segments: [{ address: 0x800000, bytes: content }] });

/** Comparing images. */
export const lines: BenchLine[] = [
  {
    what: "find 60 changed areas in 8 MiB",
    ours: () => changedRanges(image(before), image(after)),
    reference: { name: "one byte compare of equal buffers", work: () => Buffer.compare(before, copy) },
    notRun: null,
    budget: null,
  },
];
