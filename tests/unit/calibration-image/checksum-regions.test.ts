import { crc32 } from "node:zlib";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  type ChecksumRegion,
  checkRegions,
  type SumParameters,
} from "@/lib/calibration/image/checksum-regions";
import {
  CRC16_DEFAULT,
  CRC32_DEFAULT,
  type CrcParameters,
  crcOf,
} from "@/lib/calibration/image/cyclic-redundancy";

const CHECK = new TextEncoder().encode("123456789");
type Row = [
  name: string,
  width: 16 | 32,
  poly: number,
  init: number,
  refl: boolean,
  xor: number,
  check: number,
];

// Check values for "123456789" as in the RevEng catalogue of parametrised CRC algorithms, from memory.
const CATALOGUE: Row[] = [
  ["CRC-32/ISO-HDLC", 32, 0x04c11db7, 0xffffffff, true, 0xffffffff, 0xcbf43926],
  ["CRC-32/BZIP2", 32, 0x04c11db7, 0xffffffff, false, 0xffffffff, 0xfc891918],
  ["CRC-32/MPEG-2", 32, 0x04c11db7, 0xffffffff, false, 0, 0x0376e6e7],
  ["CRC-32/JAMCRC", 32, 0x04c11db7, 0xffffffff, true, 0, 0x340bc6d9],
  ["CRC-32/CKSUM", 32, 0x04c11db7, 0, false, 0xffffffff, 0x765e7680],
  ["CRC-32/ISCSI", 32, 0x1edc6f41, 0xffffffff, true, 0xffffffff, 0xe3069283],
  ["CRC-32/AUTOSAR", 32, 0xf4acfb13, 0xffffffff, true, 0xffffffff, 0x1697d06a],
  ["CRC-32/XFER", 32, 0x000000af, 0, false, 0, 0xbd0be338],
  ["CRC-16/ARC", 16, 0x8005, 0, true, 0, 0xbb3d],
  ["CRC-16/MODBUS", 16, 0x8005, 0xffff, true, 0, 0x4b37],
  ["CRC-16/IBM-3740 (CCITT-FALSE)", 16, 0x1021, 0xffff, false, 0, 0x29b1],
  ["CRC-16/XMODEM", 16, 0x1021, 0, false, 0, 0x31c3],
  ["CRC-16/KERMIT", 16, 0x1021, 0, true, 0, 0x2189],
  ["CRC-16/IBM-SDLC (X-25)", 16, 0x1021, 0xffff, true, 0xffff, 0x906e],
  ["CRC-16/GENIBUS", 16, 0x1021, 0xffff, false, 0xffff, 0xd64e],
  ["CRC-16/UMTS", 16, 0x8005, 0, false, 0, 0xfee8],
];
const parametersOf = ([, , polynomial, initial, reflect, finalXor]: Row): CrcParameters => ({
  polynomial,
  initial,
  reflectIn: reflect,
  reflectOut: reflect,
  finalXor,
});

describe("cyclic redundancy checks", () => {
  it.each(CATALOGUE)("%s gives its published check value", (...row) => {
    expect(crcOf([CHECK], row[1], parametersOf(row))).toBe(row[6]);
  });
  it("the default CRC-32 is that of node:zlib, in any pieces", () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 300 }), fc.nat(300), (bytes, at) => {
        const pieces = [bytes.subarray(0, at), bytes.subarray(at)];
        expect(crcOf(pieces, 32, CRC32_DEFAULT)).toBe(crc32(bytes));
      }),
      { numRuns: 200, seed: 31 },
    );
  });
  it("any parameters: equal to the division carried out bit by bit, as the definition states it", () => {
    const flip = (value: bigint, width: number) =>
      BigInt(`0b${value.toString(2).padStart(width, "0").split("").reverse().join("")}`);
    const slow = (bytes: Uint8Array, width: 16 | 32, p: CrcParameters) => {
      const [w, mask] = [BigInt(width), (1n << BigInt(width)) - 1n];
      let crc = BigInt(p.initial);
      for (const byte of bytes) {
        const input = p.reflectIn ? flip(BigInt(byte), 8) : BigInt(byte);
        crc ^= input << (w - 8n);
        for (let bit = 0; bit < 8; bit++)
          crc = (crc >> (w - 1n)) & 1n ? ((crc << 1n) ^ BigInt(p.polynomial)) & mask : (crc << 1n) & mask;
      }
      return Number((p.reflectOut ? flip(crc, width) : crc) ^ BigInt(p.finalXor));
    };
    fc.assert(
      fc.property(
        fc.uint8Array({ maxLength: 40 }),
        fc.constantFrom(16 as const, 32 as const),
        fc.tuple(fc.nat(0xffffffff), fc.nat(0xffffffff), fc.nat(0xffffffff)),
        fc.boolean(),
        fc.boolean(),
        (bytes, width, numbers, reflectIn, reflectOut) => {
          const [polynomial, initial, finalXor] = numbers.map((n) => (width === 16 ? n & 0xffff : n));
          const p = { polynomial, initial, finalXor, reflectIn, reflectOut };
          expect(crcOf([bytes], width, p)).toBe(slow(bytes, width, p));
        },
      ),
      { numRuns: 300, seed: 32 },
    );
  });
});

const image = (address: number, ...bytes: number[]) => ({
  segments: [{ address, bytes: Uint8Array.from(bytes) }],
});
const region = (over: Partial<ChecksumRegion>): ChecksumRegion =>
  ({
    name: "calibration",
    from: 0x100,
    to: 0x108,
    algorithm: "crc32",
    parameters: CRC32_DEFAULT,
    storedAt: null,
    expected: null,
    byteOrder: "little",
    ...over,
  }) as ChecksumRegion;
const sum = (wordBytes: 1 | 2 | 4, wordOrder: "little" | "big", complement: SumParameters["complement"]) => ({
  wordBytes,
  wordOrder,
  complement,
});
const one =
  (...given: Parameters<typeof image>) =>
  (declared: Partial<ChecksumRegion>) =>
    checkRegions(image(...given), [region(declared)])[0];

describe("declared regions", () => {
  const withValue = one(0x100, ...CHECK, 0x26, 0x39, 0xf4, 0xcb, 0x29, 0xb1);
  it("a stored value holds in the byte order declared, and is broken in the other", () => {
    expect(withValue({ storedAt: 0x109 })).toEqual({
      name: "calibration",
      state: "holds",
      found: "0xCBF43926",
      expected: "0xCBF43926",
      sentence: 'Region "calibration", 0x100 to 0x108: its CRC-32 is 0xCBF43926, as stored at 0x109.',
    });
    const other = withValue({ storedAt: 0x109, byteOrder: "big" });
    expect([other.state, other.expected]).toEqual(["broken", "0x2639F4CB"]);
    expect(other.sentence).toMatch(/is 0xCBF43926, but 0x2639F4CB is stored at 0x109\.$/);
    const short = {
      algorithm: "crc16",
      parameters: CRC16_DEFAULT,
      storedAt: 0x10d,
      byteOrder: "big",
    } as const;
    expect(withValue(short).state).toBe("holds");
  });
  it("a declared value is compared too, also beside a stored one", () => {
    expect(withValue({ expected: 0xcbf43926 }).state).toBe("holds");
    expect(withValue({ expected: 0 }).sentence).toMatch(/but 0x00000000 is declared\.$/);
    expect(withValue({ storedAt: 0x109, expected: 0xcbf43926 }).state).toBe("holds");
    expect(withValue({ storedAt: 0x109, expected: 5 }).state).toBe("broken");
  });
  it("the stored value's own bytes are left out where they lie inside", () => {
    const inside = one(0x100, ...CHECK.subarray(0, 4), 0x26, 0x39, 0xf4, 0xcb, ...CHECK.subarray(4));
    expect(inside({ to: 0x10c, storedAt: 0x104 }).state).toBe("holds");
    // Half inside: only the bytes of the region itself are summed.
    const edge = one(0x100, 1, 2, 3, 6, 0);
    const declared = {
      to: 0x103,
      storedAt: 0x103,
      algorithm: "sum16",
      parameters: sum(1, "big", "none"),
    } as const;
    expect(edge(declared).state).toBe("holds");
  });
  it("excluded stretches may be missing in the image and may overlap", () => {
    const sparse = {
      segments: [
        { address: 0x100, bytes: CHECK.subarray(0, 4) },
        { address: 0x200, bytes: CHECK.subarray(4) },
      ],
    };
    const declared = region({ to: 0x204, expected: 0xcbf43926, excluded: [{ from: 0x104, to: 0x1ff }] });
    expect(checkRegions(sparse, [declared])[0].state).toBe("holds");
    const overlapping = [
      { from: 0x180, to: 0x1ff },
      { from: 0x104, to: 0x190 },
    ];
    expect(checkRegions(sparse, [{ ...declared, excluded: overlapping }])[0].state).toBe("holds");
  });
  it.each<[string, Partial<ChecksumRegion>, RegExp]>([
    ["a byte missing at the end", { to: 0x110, expected: 0 }, /no byte at 0x10F, so it can't be checked/],
    ["a byte missing at the start", { from: 0xfe, expected: 0 }, /no byte at 0xFE,/],
    ["a stored value outside the image", { storedAt: 0x10d }, /no byte at 0x10F,/],
    ["nothing to compare with", {}, /neither a stored nor an expected value/],
    ["ends before it begins", { to: 0xff, expected: 0 }, /nothing is left of it/],
    [
      "words that do not come out even",
      { expected: 0, algorithm: "sum16", parameters: sum(2, "big", "none") },
      /9 bytes without a gap are no whole number of 16-bit words/,
    ],
  ])("%s: not there, with the reason", (_, declared, sentence) => {
    const result = withValue(declared);
    expect([result.state, result.found, result.expected]).toEqual(["not_there", null, null]);
    expect(result.sentence).toMatch(/^Region "calibration": /);
    expect(result.sentence).toMatch(sentence);
  });
  // By hand: bytes FF 01 02 80.
  it.each([
    ["sum8", 1, "big", "none", 0x82],
    ["sum8", 1, "big", "ones", 0x7d],
    ["sum8", 1, "big", "twos", 0x7e],
    ["sum16", 1, "big", "none", 0x182],
    ["sum16", 2, "big", "none", 0x0181],
    ["sum16", 2, "little", "none", 0x8201],
    ["sum16", 2, "little", "ones", 0x7dfe],
    ["sum32", 2, "big", "none", 0x10181],
    ["sum32", 4, "big", "none", 0xff010280],
    ["sum32", 4, "little", "twos", 0x7ffdfe01],
  ] as const)(
    "%s of %s-byte words, %s endian, complement %s",
    (algorithm, bytes, order, complement, value) => {
      const declared = { algorithm, parameters: sum(bytes, order, complement), to: 0x103, expected: value };
      expect(one(0x100, 0xff, 0x01, 0x02, 0x80)(declared).state).toBe("holds");
    },
  );
  it("a sum of zero has two's complement zero, and large sums stay exact", () => {
    const zero = { algorithm: "sum8", parameters: sum(1, "big", "twos"), to: 0x101, expected: 0 } as const;
    expect(one(0x100, 0, 0)(zero).state).toBe("holds");
    const bytes = new Uint8Array(4 * 2 ** 20).fill(0xff);
    // 2^20 words of 2^32 − 1: their sum is −2^20 modulo 2^32.
    const large = region({
      from: 0,
      to: bytes.length - 1,
      algorithm: "sum32",
      parameters: sum(4, "little", "none"),
      expected: 2 ** 32 - 2 ** 20,
    });
    expect(checkRegions({ segments: [{ address: 0, bytes }] }, [large])[0].state).toBe("holds");
  });
  it("any byte of a region changed breaks it; a byte outside does not (property)", () => {
    fc.assert(
      fc.property(fc.nat(14), fc.integer({ min: 1, max: 255 }), (at, flip) => {
        const bytes = [...CHECK, 0x26, 0x39, 0xf4, 0xcb, 0, 0];
        bytes[at] ^= flip;
        expect(one(0x100, ...bytes)({ storedAt: 0x109 }).state).toBe(at < 13 ? "broken" : "holds");
      }),
      { numRuns: 200, seed: 33 },
    );
  });
});
