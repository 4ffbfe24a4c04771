import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { readLog } from "@/lib/logs/read-log";
import { codesOf, columnOf } from "@/tests/support/golden-log";
import {
  type WrittenChannel,
  type WrittenData,
  type WrittenGroup,
  writeMdf,
} from "@/tests/support/mdf-writer";

const TIME: WrittenChannel = {
  name: "time",
  unit: "s",
  type: 2,
  sync: 1,
  dataType: 4,
  byteOffset: 0,
  bitCount: 64,
};

/** Sets the low `bits` of `value` at a bit place, one bit after the other; big-endian counts the bytes of the span from its end. */
function setBits(
  record: Uint8Array,
  place: { byte: number; bit: number; bits: number; big: boolean },
  value: bigint,
): void {
  const width = Math.ceil((place.bit + place.bits) / 8);
  for (let k = 0; k < place.bits; k++) {
    if (((value >> BigInt(k)) & 1n) === 0n) continue;
    const at = place.bit + k;
    const byte = place.big ? width - 1 - (at >> 3) : at >> 3;
    record[place.byte + byte] |= 1 << (at & 7);
  }
}

/** Records of `size` bytes with the time i/100 in front. */
function records(count: number, size: number, fill: (record: Uint8Array, i: number) => void): Uint8Array {
  const all = new Uint8Array(count * size);
  for (let i = 0; i < count; i++) {
    const record = all.subarray(i * size, (i + 1) * size);
    new DataView(record.buffer, record.byteOffset).setFloat64(0, i / 100, true);
    fill(record, i);
  }
  return all;
}

const group = (
  channels: WrittenChannel[],
  dataBytes: number,
  cycles: number,
  more: Partial<WrittenGroup> = {},
): WrittenGroup => ({
  channels: [TIME, ...channels],
  dataBytes,
  cycles,
  ...more,
});
const FORMS = ["plain", "list", "deflate", "transposed", "header-list"] as const;

describe("what the writer wrote is read back (property)", { timeout: 30_000 }, () => {
  it("integers of any width and place in either byte order", () => {
    const places = fc.record({
      bits: fc.integer({ min: 1, max: 64 }),
      bit: fc.nat(7),
      big: fc.boolean(),
      signed: fc.boolean(),
      byte: fc.nat(3),
    });
    fc.assert(
      fc.property(
        places,
        fc.array(fc.bigInt({ min: 0n, max: 2n ** 64n - 1n }), { minLength: 3, maxLength: 20 }),
        fc.constantFrom(...FORMS),
        (place, raw, form) => {
          const size = 8 + place.byte + 9;
          const values = raw.map((value) => BigInt.asUintN(place.bits, value));
          const stream = records(values.length, size, (record, i) =>
            setBits(record, { ...place, byte: 8 + place.byte }, values[i]),
          );
          const dataType = (place.signed ? 2 : 0) + (place.big ? 1 : 0);
          const channel = {
            name: "x",
            dataType,
            bitOffset: place.bit,
            byteOffset: 8 + place.byte,
            bitCount: place.bits,
          };
          const table = readLog(
            writeMdf([{ groups: [group([channel], size, values.length)], stream, form, blockBytes: 60 }]),
          );
          const want = values.map((value) => Number(place.signed ? BigInt.asIntN(place.bits, value) : value));
          expect(Array.from(columnOf(table, "x").values)).toEqual(want);
          expect(table.rowsRead).toBe(values.length);
        },
      ),
      { numRuns: 150, seed: 11 },
    );
  });

  it("floats of 32 and 64 bits to the last bit, with invalidation bits", () => {
    const sample = fc.record({
      value: fc.double({ noDefaultInfinity: true, noNaN: true }),
      valid: fc.boolean(),
    });
    fc.assert(
      fc.property(
        fc.array(sample, { minLength: 3, maxLength: 30 }),
        fc.boolean(),
        fc.nat(15),
        (samples, big, bit) => {
          const stream = records(samples.length, 22, (record, i) => {
            const view = new DataView(record.buffer, record.byteOffset);
            view.setFloat64(8, samples[i].value, !big);
            view.setFloat32(16, samples[i].value, !big);
            if (!samples[i].valid) record[20 + (bit >> 3)] |= 1 << (bit & 7);
          });
          const valid = { flags: 2, invalidationBit: bit, dataType: big ? 5 : 4 };
          const channels = [
            { ...valid, name: "wide", byteOffset: 8, bitCount: 64 },
            { ...valid, name: "narrow", byteOffset: 16, bitCount: 32, flags: 0 },
          ];
          const table = readLog(
            writeMdf([{ groups: [group(channels, 20, samples.length, { invalidationBytes: 2 })], stream }]),
          );
          expect(Array.from(columnOf(table, "wide").values)).toEqual(
            samples.map((s) => (s.valid ? s.value : Number.NaN)),
          );
          expect(Array.from(columnOf(table, "narrow").values)).toEqual(
            samples.map((s) => Math.fround(s.value)),
          );
        },
      ),
      { numRuns: 200, seed: 12 },
    );
  });

  it("mixed records of several kinds, each kind with its own number of rows", () => {
    const order = fc.array(fc.constantFrom(1, 2, 3), { minLength: 40, maxLength: 120 });
    fc.assert(
      fc.property(order, fc.constantFrom(1, 2, 4, 8), fc.constantFrom(...FORMS), (kinds, idBytes, form) => {
        const counts = [0, 0, 0];
        const pieces: Uint8Array[] = [];
        for (const kind of kinds) {
          const id = new Uint8Array(idBytes);
          id[0] = kind;
          const i = counts[kind - 1]++;
          const text = new TextEncoder().encode(`text ${i}`);
          const body = kind < 3 ? records(1, 12, () => undefined) : new Uint8Array(4 + text.length);
          const view = new DataView(body.buffer);
          if (kind < 3) {
            view.setFloat64(0, i / (10 * kind), true);
            view.setUint32(8, 1000 * kind + i, true);
          } else {
            view.setUint32(0, text.length, true);
            body.set(text, 4);
          }
          pieces.push(id, body);
        }
        const value = { name: "", dataType: 0, byteOffset: 8, bitCount: 32 };
        const groups = [1, 2].map((kind) =>
          group([{ ...value, name: `value ${kind}` }], 12, counts[kind - 1], { recordId: kind }),
        );
        const texts: WrittenGroup = { recordId: 3, flags: 1, dataBytes: 0, cycles: counts[2], channels: [] };
        const stream = new Uint8Array(Buffer.concat(pieces));
        const read = () =>
          readLog(
            writeMdf([
              { idBytes, groups: [...groups, texts], stream, form, blockBytes: 77, transposeBytes: 12 },
            ]),
          );
        const usable = [1, 2].filter((kind) => counts[kind - 1] >= 3);
        if (usable.length === 0) return;
        const table = read();
        for (const kind of usable) {
          const channel = columnOf(table, `value ${kind}`);
          expect(Array.from(channel.values)).toEqual(
            Array.from({ length: counts[kind - 1] }, (_, i) => 1000 * kind + i),
          );
          const timeS = channel.timeS ?? table.timeS;
          for (const [i, t] of timeS.entries()) expect(t).toBeCloseTo(i / (10 * kind), 9);
        }
        expect(table.leftOut.length + table.channels.length).toBe(2);
      }),
      { numRuns: 100, seed: 13 },
    );
  });
});

describe("kinds of channels", () => {
  const file = (
    channels: WrittenChannel[],
    fill: (view: DataView, i: number) => void,
    count = 5,
    more: Partial<WrittenData> = {},
  ) =>
    writeMdf([
      {
        groups: [group(channels, 24, count)],
        stream: records(count, 24, (record, i) => fill(new DataView(record.buffer, record.byteOffset), i)),
        ...more,
      },
    ]);

  it("16-bit floats: published examples of binary16 (IEEE 754-2008)", () => {
    // 1, −2, 65504 (largest), 2^-24 (smallest subnormal), 0.333251953125: en.wikipedia.org, half-precision format, examples.
    const bits = [0x3c00, 0xc000, 0x7bff, 0x0001, 0x3555];
    const table = readLog(
      file([{ name: "h", dataType: 4, byteOffset: 8, bitCount: 16 }], (v, i) =>
        v.setUint16(8, bits[i], true),
      ),
    );
    expect(Array.from(columnOf(table, "h").values)).toEqual([1, -2, 65504, 2 ** -24, 0.333251953125]);
  });

  it("a virtual channel counts the records and a virtual master makes time of that", () => {
    const master: WrittenChannel = {
      name: "t",
      type: 3,
      sync: 1,
      dataType: 0,
      byteOffset: 0,
      bitCount: 0,
      conversion: { type: 1, values: [2, 0.5] },
    };
    const counter: WrittenChannel = { name: "index", type: 6, dataType: 0, byteOffset: 0, bitCount: 0 };
    const groups = [{ channels: [master, counter], dataBytes: 24, cycles: 5 }];
    const table = readLog(writeMdf([{ groups, stream: records(5, 24, () => undefined) }]));
    expect(Array.from(columnOf(table, "index").values)).toEqual([0, 1, 2, 3, 4]);
    expect(Array.from(table.timeS)).toEqual([0, 0.5, 1, 1.5, 2]);
  });

  it("members of a structure are read under its name; arrays, dates and raw bytes are left out by name", () => {
    const inner = { name: "b", dataType: 0, byteOffset: 9, bitCount: 8 };
    const channels: WrittenChannel[] = [
      { name: "a", dataType: 10, byteOffset: 8, bitCount: 16, composition: [inner] },
      { name: "map", dataType: 0, byteOffset: 8, bitCount: 8, composition: "array" },
      { name: "date", dataType: 13, byteOffset: 8, bitCount: 56 },
      { name: "outside", dataType: 0, byteOffset: 20, bitCount: 64 },
    ];
    const table = readLog(file(channels, (v, i) => v.setUint8(9, 10 + i)));
    expect(Array.from(columnOf(table, "a.b").values)).toEqual([10, 11, 12, 13, 14]);
    expect(table.leftOut).toEqual(["a", "map", "date", "outside"]);
    expect(codesOf(table).filter((code) => code === "channel_left_out").length).toBe(4);
  });

  it("text of variable length and of a fixed one is left out with its first and last value", () => {
    const words = new TextEncoder().encode("\u0003\u0000\u0000\u0000off\u0002\u0000\u0000\u0000on");
    const channels: WrittenChannel[] = [
      { name: "word", type: 1, dataType: 7, byteOffset: 8, bitCount: 64, texts: { stream: words } },
      { name: "tag", dataType: 6, byteOffset: 16, bitCount: 32 },
      { name: "x", dataType: 0, byteOffset: 20, bitCount: 8 },
    ];
    const table = readLog(
      file(channels, (v, i) => {
        v.setUint32(8, i === 4 ? 7 : 0, true);
        v.setUint16(16, 0x4130 + i, false);
      }),
    );
    expect(table.leftOut).toEqual(["word", "tag"]);
    expect(table.problems[0].message).toBe(
      'Text is not read: "word" (first "off", last "on"), "tag" (first "A0", last "A4").',
    );
  });

  it("groups of several rates: the road speed gives the rows, slower channels keep their times on the same zero", () => {
    const speed = { name: "GPS speed", unit: "km/h", dataType: 0, byteOffset: 8, bitCount: 16 };
    const slow = {
      name: "lambda",
      dataType: 0,
      byteOffset: 8,
      bitCount: 8,
      conversion: { type: 1, values: [0, 0.01] },
    };
    const fast = records(500, 24, (record) =>
      new DataView(record.buffer, record.byteOffset).setUint16(8, 36, true),
    );
    const late = records(4, 24, (record, i) => {
      new DataView(record.buffer, record.byteOffset).setFloat64(0, 0.125 + i, true);
      record[8] = 90 + i;
    });
    const files = [
      { groups: [group([slow], 24, 4, { name: "sensors" })], stream: late },
      { groups: [group([speed], 24, 500)], stream: fast },
    ];
    const table = readLog(writeMdf(files, { startNs: 1_893_456_000_000_000_000n }));
    expect(table.rowsRead).toBe(500);
    expect(table.time).toMatchObject({ rateHz: 100, toS: 4.99, from: "2030-01-01T00:00:00.000Z" });
    expect(columnOf(table, "GPS speed").values[7]).toBeCloseTo(10, 12);
    const lambda = columnOf(table, "lambda");
    expect(lambda.channel).toBe("lambda");
    expect(Array.from(lambda.timeS ?? [])).toEqual([0.125, 1.125, 2.125, 3.125]);
    expect(Array.from(lambda.values)).toEqual([0.9, 0.91, 0.92, 0.93]);
  });
});
