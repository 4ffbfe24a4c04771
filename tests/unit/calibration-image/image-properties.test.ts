import { createHash } from "node:crypto";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { changedRanges } from "@/lib/calibration/image/changed-ranges";
import { imageIdentity } from "@/lib/calibration/image/image-identity";
import { readImage } from "@/lib/calibration/image/read-image";
import type { ImageSegment } from "@/lib/calibration/image/types";
import { FileRefusedError } from "@/lib/errors";
import { hexRecord, records, sRecord } from "../../support/record-files";

/** Sparse images up to the end of 32-bit space: segments that do not touch. */
const image = fc
  .uniqueArray(fc.tuple(fc.nat(2 ** 20 - 1), fc.uint8Array({ minLength: 1, maxLength: 90 })), {
    selector: ([slot]) => slot,
    minLength: 1,
    maxLength: 6,
  })
  .map((slots): ImageSegment[] =>
    slots
      .map(([slot, bytes]) => ({ address: slot * 4096 + (slot % 3), bytes }))
      .sort((a, b) => a.address - b.address),
  );
const order = fc.array(fc.nat(), { minLength: 60, maxLength: 60 });

function shuffled<T>(items: T[], keys: readonly number[]): T[] {
  return items
    .map((item, i) => ({ item, key: keys[i % keys.length] }))
    .sort((a, b) => a.key - b.key)
    .map(({ item }) => item);
}
const plain = (segments: readonly ImageSegment[]) => segments.map((s) => [s.address, ...s.bytes]);
const read = (text: string) => readImage(new TextEncoder().encode(text), { fileName: "image" });

describe("what a writer wrote is read back, in any order and record size", () => {
  it("Intel HEX with linear bases", () => {
    fc.assert(
      fc.property(
        image,
        fc.integer({ min: 1, max: 255 }),
        order,
        fc.constantFrom("\n", "\r\n", "\r"),
        (segments, size, keys, end) => {
          const lines = shuffled(records(segments, size), keys).flatMap(({ address, data }) => {
            const bank = Math.floor(address / 65536);
            return [hexRecord(4, 0, [bank >> 8, bank & 0xff]), hexRecord(0, address % 65536, data)];
          });
          const got = read([...lines, ":00000001FF"].join(end));
          expect(plain(got.segments)).toEqual(plain(segments));
          expect(imageIdentity(got)).toBe(imageIdentity({ segments }));
        },
      ),
      { numRuns: 150, seed: 11 },
    );
  });
  it("S3 records with their count", () => {
    fc.assert(
      fc.property(image, fc.integer({ min: 1, max: 250 }), order, (segments, size, keys) => {
        const parts = shuffled(records(segments, size), keys);
        const lines = parts.map(({ address, data }) => sRecord(3, address, data));
        const got = read(
          [sRecord(0, 0, [65]), ...lines, sRecord(5, parts.length, []), sRecord(7, 0, [])].join("\n"),
        );
        expect(plain(got.segments)).toEqual(plain(segments));
        expect(got.notes.filter((note) => note.code !== "records_out_of_order")).toEqual([]);
      }),
      { numRuns: 150, seed: 12 },
    );
  });
});

describe("one content has one identity", () => {
  it("as HEX with linear or with segment bases, as S1, S2 or S3, and as raw bytes", () => {
    const placed = fc.tuple(fc.nat(0xff00), fc.uint8Array({ minLength: 1, maxLength: 200 }));
    fc.assert(
      fc.property(placed, fc.integer({ min: 1, max: 64 }), ([address, bytes], size) => {
        const parts = records([{ address, bytes }], size);
        const sRecords = (type: number) => parts.map((p) => sRecord(type, p.address, p.data)).join("\n");
        // A base of 16 bytes steps: the offset is what is left of the address.
        const segmented = parts.flatMap((p) => [
          hexRecord(2, 0, [p.address >> 12, (p.address >> 4) & 0xff]),
          hexRecord(0, p.address % 16, p.data),
        ]);
        const linear = parts.map((p) => hexRecord(0, p.address, p.data));
        const texts = [
          [...segmented, ":00000001FF"].join("\n"),
          [...linear, ":00000001FF"].join("\r\n"),
          ...[1, 2, 3].map(sRecords),
        ];
        const raw = readImage(bytes, { fileName: "image.bin", baseAddress: address });
        const identities = [...texts.map(read), raw].map(imageIdentity);
        expect(new Set(identities)).toEqual(new Set([imageIdentity({ segments: [{ address, bytes }] })]));
      }),
      { numRuns: 150, seed: 15 },
    );
  });
});

describe("damage is never read as a good image", () => {
  it("one digit of a record changed: refused", () => {
    fc.assert(
      fc.property(image, fc.nat(), fc.integer({ min: 1, max: 15 }), (segments, at, delta) => {
        const lines = records(segments, 16).flatMap(({ address, data }) => {
          const bank = Math.floor(address / 65536);
          return [hexRecord(4, 0, [bank >> 8, bank & 0xff]), hexRecord(0, address % 65536, data)];
        });
        const text = [...lines, ":00000001FF"].join("\n");
        const places = Array.from(text, (_, i) => i).filter((i) => /[\dA-F]/.test(text[i]));
        const place = places[at % places.length];
        const digit = ((Number.parseInt(text[place], 16) + delta) % 16).toString(16).toUpperCase();
        const damaged = text.slice(0, place) + digit + text.slice(place + 1);
        expect(() => read(damaged)).toThrow(FileRefusedError);
      }),
      { numRuns: 300, seed: 13 },
    );
  });
  it("cut off anywhere: refused", () => {
    const text = [
      hexRecord(4, 0, [0, 1]),
      hexRecord(0, 0x10, [1, 2, 3, 4]),
      hexRecord(0, 0x14, [5, 6]),
      ":00000001FF",
    ].join("\n");
    for (let length = 1; length < text.length; length++) {
      expect(() => read(text.slice(0, length)), `first ${length} characters`).toThrow(FileRefusedError);
    }
  });
});

describe("changed ranges", () => {
  /** Byte by byte over a map: slow, and shares nothing with the code under test. */
  const slow = (a: readonly ImageSegment[], b: readonly ImageSegment[]) => {
    const bytesOf = (segments: readonly ImageSegment[]) =>
      new Map(segments.flatMap((s) => Array.from(s.bytes, (byte, i) => [s.address + i, byte] as const)));
    const [x, y] = [bytesOf(a), bytesOf(b)];
    const addresses = [...new Set([...x.keys(), ...y.keys()])].sort((p, q) => p - q);
    return addresses
      .filter((address) => x.get(address) !== y.get(address))
      .map((address) => [address, x.has(address) ? (y.has(address) ? "differs" : "only a") : "only b"]);
  };
  const spread = (ranges: ReturnType<typeof changedRanges>) =>
    ranges.flatMap(({ address, length, kind }) => Array.from({ length }, (_, i) => [address + i, kind]));

  it("are exactly the addresses at which a plain byte map differs (property)", () => {
    const near = fc
      .array(
        fc.tuple(fc.nat(40), fc.array(fc.integer({ min: 0, max: 2 }), { minLength: 1, maxLength: 12 })),
        { maxLength: 4 },
      )
      .map((parts): ImageSegment[] => {
        const bytes = new Map(parts.flatMap(([at, data]) => data.map((byte, i) => [at + i, byte] as const)));
        const segments: ImageSegment[] = [];
        for (const address of [...bytes.keys()].sort((p, q) => p - q)) {
          const last = segments[segments.length - 1];
          const byte = bytes.get(address) ?? 0;
          if (last && last.address + last.bytes.length === address)
            last.bytes = new Uint8Array([...last.bytes, byte]);
          else segments.push({ address, bytes: new Uint8Array([byte]) });
        }
        return segments;
      });
    fc.assert(
      fc.property(near, near, (a, b) => {
        const ranges = changedRanges({ segments: a }, { segments: b });
        expect(spread(ranges)).toEqual(slow(a, b));
        // Longest runs: two neighbouring ranges of one kind never touch.
        for (let i = 1; i < ranges.length; i++) {
          const touch = ranges[i - 1].address + ranges[i - 1].length === ranges[i].address;
          expect(touch && ranges[i - 1].kind === ranges[i].kind).toBe(false);
        }
      }),
      { numRuns: 500, seed: 14 },
    );
  });
  it("a run across the border of two compared blocks is one range", () => {
    const a = new Uint8Array(4096);
    const b = a.slice();
    b.fill(7, 1020, 1030);
    b[4095] = 1;
    const got = changedRanges(
      { segments: [{ address: 0x810000, bytes: a }] },
      { segments: [{ address: 0x810000, bytes: b }] },
    );
    expect(got).toEqual([
      { address: 0x810000 + 1020, length: 10, kind: "differs" },
      { address: 0x810fff, length: 1, kind: "differs" },
    ]);
    expect(
      changedRanges(
        { segments: [{ address: 0, bytes: a }] },
        { segments: [{ address: 0, bytes: a.slice() }] },
      ),
    ).toEqual([]);
  });
  it("the identity is that of the content: equal exactly when no range differs", () => {
    const bytes = createHash("sha256").update("seed").digest();
    const one = { segments: [{ address: 16, bytes: new Uint8Array(bytes) }] };
    const split = {
      segments: [
        { address: 16, bytes: new Uint8Array(bytes.subarray(0, 8)) },
        { address: 25, bytes: new Uint8Array(bytes.subarray(9)) },
      ],
    };
    expect(changedRanges(one, split)).toEqual([{ address: 24, length: 1, kind: "only a" }]);
    expect(imageIdentity(one)).not.toBe(imageIdentity(split));
  });
});
