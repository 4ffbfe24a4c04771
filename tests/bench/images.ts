import { changedRanges } from "@/lib/calibration/image/changed-ranges";
import { readImage } from "@/lib/calibration/image/read-image";
import type { CalibrationImage } from "@/lib/calibration/image/types";
import { randomStream } from "@/lib/signal/random";
import { hexRecord, records, sRecord } from "../support/record-files";
import type { BenchLine } from "./line";

const SIZE = 8 * 1024 * 1024;
const ADDRESS = 0x800000;
const EDITS = 40;

/** Bytes without a pattern, an equal copy of them, and one in which forty places of one to eight bytes were changed. */
function editedImage(): { before: Buffer; copy: Buffer; after: Buffer } {
  const random = randomStream(8, 0);
  const before = Buffer.from(Uint8Array.from({ length: SIZE }, () => random.nextBelow(256)));
  const after = Buffer.from(before);
  for (let edit = 0; edit < EDITS; edit++) {
    // One edit in each fortieth, so that none touches another.
    const at = edit * Math.floor(SIZE / EDITS) + random.nextBelow(SIZE / EDITS - 8);
    const bytes = 1 + random.nextBelow(8);
    for (let i = 0; i < bytes; i++) after[at + i] ^= 0xff;
  }
  return { before, copy: Buffer.from(before), after };
}
const { before, copy, after } = editedImage();
const image = (bytes: Uint8Array) => ({ segments: [{ address: ADDRESS, bytes }] });
const parts = () => records(image(before).segments, 32);

const WRITTEN = {
  hex: () =>
    [
      ...parts().flatMap(({ address, data }) => {
        const record = hexRecord(0, address % 65536, data);
        const bank = address >>> 16;
        return address % 65536 === 0 ? [hexRecord(4, 0, [bank >> 8, bank & 0xff]), record] : [record];
      }),
      ":00000001FF",
    ].join("\r\n"),
  s19: () =>
    [...parts().map(({ address, data }) => sRecord(3, address, data)), sRecord(7, 0, [])].join("\r\n"),
};

/** Reads an 8 MiB image written as records of 32 bytes; written only when the line is run. */
function readingLine(kind: keyof typeof WRITTEN, name: string): BenchLine {
  let file: Uint8Array | null = null;
  let read: Pick<CalibrationImage, "segments"> = { segments: [] };
  return {
    what: `read an image of 8 MiB as ${name}`,
    ours: () => {
      file ??= new TextEncoder().encode(WRITTEN[kind]());
      read = readImage(file, { fileName: `image.${kind}` });
    },
    reference: null,
    notRun: null,
    budget: 0.4,
    agreement: () => {
      if (read.segments.length !== 1 || Buffer.compare(read.segments[0].bytes, before) !== 0)
        throw new Error("the image read is not the one written");
      return `${((file?.length ?? 0) / 1e6).toFixed(1)} MB of text, bytes as written`;
    },
  };
}

/** Reading and comparing images. */
export const lines: BenchLine[] = [
  {
    what: `find ${EDITS} changed places in 8 MiB`,
    ours: () => changedRanges(image(before), image(after)),
    // Of equal buffers: of these two it would stop at the first change.
    reference: { name: "Buffer.compare over the whole image", work: () => Buffer.compare(before, copy) },
    notRun: null,
    budget: 2,
    agreement: () => {
      const found = changedRanges(image(before), image(after));
      if (found.length !== EDITS) throw new Error(`${found.length} places found`);
      return `${found.length} places`;
    },
  },
  readingLine("hex", "Intel HEX"),
  readingLine("s19", "S-record"),
];
