import { createHash } from "node:crypto";
import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { changedRanges } from "@/lib/calibration/image/changed-ranges";
import { imageIdentity } from "@/lib/calibration/image/image-identity";
import { readImage } from "@/lib/calibration/image/read-image";
import { type CalibrationImage, IMAGE_REFUSALS } from "@/lib/calibration/image/types";
import { FileRefusedError } from "@/lib/errors";
import { hexRecord, sRecord } from "../../support/record-files";

interface Facts {
  file: string;
  repo: string;
  sha256: string;
  tool: string;
  rc: number;
  ranges: { first: string; last: string; bytes: number; sha256: string }[];
  start_address: string | null;
  header: string | null;
}
const golden = (name: string) => readFileSync(new URL(`../../golden/images/${name}`, import.meta.url));
const file = (name: string) => new Uint8Array(gunzipSync(golden(`${name}.gz`)));
const FACTS = JSON.parse(golden("facts.json").toString("utf8")) as Facts[];
const sha256 = (bytes: Uint8Array) => createHash("sha256").update(bytes).digest("hex");
const ascii = (text: string) => new TextEncoder().encode(text);
const read = (text: string, fileName = "image") => readImage(ascii(text), { fileName });
const refusal = (act: () => unknown): FileRefusedError => {
  try {
    act();
  } catch (error) {
    if (error instanceof FileRefusedError) {
      expect(IMAGE_REFUSALS).toContain(error.code);
      return error;
    }
    throw error;
  }
  throw new Error("was read");
};
const layout = (image: CalibrationImage) => image.segments.map((s) => [s.address, s.bytes.length]);
const codes = (image: CalibrationImage) => image.notes.map((note) => note.code);

describe("real files: ranges and bytes as srec_info and srec_cat 1.64 state them", () => {
  // Word-addressed files overlap when read as bytes: the outside tool gives no bytes for them either (0 bytes a range).
  const words = (facts: Facts) => facts.file.includes("16bits");
  for (const facts of FACTS.filter((f) => f.rc === 0 && !words(f))) {
    it(`${facts.file} (${facts.repo})`, () => {
      const bytes = file(facts.file);
      expect(sha256(bytes)).toBe(facts.sha256);
      const image = readImage(bytes, { fileName: facts.file });
      const got = image.segments.map(({ address, bytes: b }) => ({
        first: `0x${address.toString(16).toUpperCase()}`,
        last: `0x${(address + b.length - 1).toString(16).toUpperCase()}`,
        bytes: b.length,
        sha256: sha256(b),
      }));
      const byAddress = [...facts.ranges].sort((x, y) => Number(x.first) - Number(y.first));
      expect(got).toEqual(byAddress);
      if (facts.start_address !== null) expect(image.startAddress).toBe(Number(facts.start_address));
      if (facts.header !== null) expect(JSON.stringify(image.header)).toBe(facts.header);
    });
  }
  it.each(FACTS.filter(words).map((f) => f.file))(
    "%s counts addresses in words: refused on the overlap",
    (name) => {
      const error = refusal(() => readImage(file(name), { fileName: name }));
      expect(error.code).toBe("overlap_differs");
      expect(error.message).toMatch(
        /^Line \d+: the byte at 0x[\dA-F]+ was given another value in line \d+\./,
      );
    },
  );
  it("bincopy_bad_crc.s19: wrong checksum in line 1 (srec_info says the same)", () => {
    const error = refusal(() => readImage(file("bincopy_bad_crc.s19"), { fileName: "bad.s19" }));
    expect([error.code, error.details]).toEqual(["checksum_wrong", { line: 1 }]);
  });
  it("every file of the set is in one of these tests", () => {
    expect(FACTS).toHaveLength(29);
    expect(FACTS.filter((f) => f.rc !== 0).map((f) => f.file)).toEqual(["bincopy_bad_crc.s19"]);
  });
  it("one image in HEX, S-record and raw binary has one identity; the file's own digest differs", () => {
    const hex = readImage(file("bincopy_in.hex"), { fileName: "in.hex" });
    const srec = readImage(file("bincopy_convert.s19"), { fileName: "convert.s19" });
    const raw = readImage(hex.segments[0].bytes, { fileName: "in.bin", baseAddress: 0x100 });
    expect(new Set([hex, srec, raw].map(imageIdentity)).size).toBe(1);
    expect(new Set([hex, srec, raw].map((image) => image.container)).size).toBe(3);
    const elsewhere = readImage(hex.segments[0].bytes, { fileName: "in.bin", baseAddress: 0x101 });
    expect(imageIdentity(elsewhere)).not.toBe(imageIdentity(hex));
    // By hand: SHA-256 over address 0x100 and length 0x40 as 64-bit big endian, then the 64 bytes.
    const head = Buffer.from("00000000000001000000000000000040", "hex");
    expect(imageIdentity(hex)).toBe(sha256(Buffer.concat([head, hex.segments[0].bytes])));
  });
});

/** Two data bytes at an offset of the base in force. */
const data = (offset: number, ...bytes: number[]) => hexRecord(0, offset, bytes);
const linear = (high: number) => hexRecord(4, 0, [high >> 8, high & 0xff]);
const segment = (base: number) => hexRecord(2, 0, [base >> 8, base & 0xff]);
const END = ":00000001FF";

describe("Intel HEX: each odd case of formats.md 1.1", () => {
  it("a line of Ctrl-Z after the end is read", () => {
    expect(layout(read(`${data(0, 1, 2)}\n${END}\n\u001a`))).toEqual([[0, 2]]);
    expect(layout(read(`${data(0, 1, 2)}\r\n${END}\r\n\u001a\r\n`))).toEqual([[0, 2]]);
  });
  it.each([
    ["no end record", `${data(0x10, 1, 2)}\n`, "no_end_record", /after line 1.*end at 0x11\./],
    ["data after the end", `${END}\n${data(0, 1)}`, "data_after_end", /^Line 2:/],
    ["text after the end", `${data(0, 1)}\n${END}\nhello`, "data_after_end", /^Line 3:/],
    ["wrong checksum", `:0100000001FF\n${END}`, "checksum_wrong", /^Line 1:/],
    [
      "overlap, different bytes",
      `${data(0, 1, 2)}\n${data(1, 9)}\n${END}`,
      "overlap_differs",
      /^Line 2: the byte at 0x1 .* line 1\./,
    ],
    [
      "type 02, data crossing FFFF",
      `${segment(0x1000)}\n${data(0xffff, 1, 2)}\n${END}`,
      "address_wraps",
      /^Line 2:/,
    ],
    ["no base, data crossing FFFF", `${data(0xffff, 1, 2)}\n${END}`, "address_wraps", /^Line 1:/],
    [
      "type 04, beyond 2^32",
      `${linear(0xffff)}\n${data(0xffff, 1, 2)}\n${END}`,
      "address_out_of_range",
      /^Line 2:/,
    ],
    ["a comment before", `; made by hand\n${data(0, 1)}\n${END}`, "line_not_a_record", /^Line 1:/],
    ["type 06", `${hexRecord(6, 0, [])}\n${END}`, "record_type_unknown", /^Line 1: record type 6/],
    [
      "a base with an offset",
      `${hexRecord(4, 9, [0, 1])}\n${data(0, 1)}\n${END}`,
      "record_offset_wrong",
      /^Line 1:/,
    ],
    ["type 04 of wrong length", `${hexRecord(4, 0, [1])}\n${END}`, "record_length_wrong", /^Line 1:/],
    ["a cut-off line", `${data(0, 1, 2).slice(0, -2)}\n${END}`, "record_cut_off", /^Line 1:/],
    ["a line too long", `${data(0, 1, 2)}00\n${END}`, "record_length_wrong", /^Line 1:/],
    ["a digit that is none", `:010000000GF6\n${END}`, "line_not_a_record", /^Line 1:/],
    ["no data at all", END, "no_data", /no data record/],
  ])("%s is refused", (_, text, code, message) => {
    const error = refusal(() => read(text));
    expect(error.code).toBe(code);
    expect(error.message).toMatch(message);
  });
  it("overlap with the same bytes is a note", () => {
    const image = read(`${data(0, 1, 2, 3)}\n${data(1, 2, 3, 4)}\n${END}`);
    expect(Array.from(image.segments[0].bytes)).toEqual([1, 2, 3, 4]);
    expect(codes(image)).toEqual(["data_repeated"]);
  });
  it("records out of order are sorted and told", () => {
    const image = read(`${data(0x20, 3)}\n${data(0x10, 1, 2)}\n${END}`);
    expect(layout(image)).toEqual([
      [0x10, 2],
      [0x20, 1],
    ]);
    expect(codes(image)).toEqual(["records_out_of_order"]);
  });
  it("type 04, data crossing FFFF run on, with a note", () => {
    const image = read(`${linear(0x0001)}\n${data(0xffff, 1, 2)}\n${END}`);
    expect(layout(image)).toEqual([[0x1ffff, 2]]);
    expect(codes(image)).toEqual(["data_cross_bank"]);
  });
  it("a base of 0xFFFF or 0x8000 gives addresses above 2 GiB; a later base replaces the earlier", () => {
    const image = read(
      `${linear(0x8000)}\n${data(0, 1)}\n${linear(0xffff)}\n${data(0xfff0, 2)}\n${segment(0x1234)}\n${data(4, 3)}\n${END}`,
    );
    expect(layout(image)).toEqual([
      [0x12344, 1],
      [0x80000000, 1],
      [0xfffffff0, 1],
    ]);
  });
  it("zero-length data, blank lines, lower case, a UTF-8 mark, CR line ends and both start records are read", () => {
    expect(layout(read(`${data(0, 1)}\n${hexRecord(0, 0x50, [])}\n${END}`))).toEqual([[0, 1]]);
    expect(layout(read(`\n\n${data(0, 0xab)}\n \n${END}\n`))).toEqual([[0, 1]]);
    expect(Array.from(read(`${data(0, 0xab, 0xcd)}\n${END}`.toLowerCase()).segments[0].bytes)).toEqual([
      0xab, 0xcd,
    ]);
    expect(
      layout(
        readImage(new Uint8Array([0xef, 0xbb, 0xbf, ...ascii(`${data(0, 1)}\n${END}`)]), { fileName: "x" }),
      ),
    ).toEqual([[0, 1]]);
    expect(layout(read(`${data(0, 1)}\r${data(1, 2)}\r${END}\r`))).toEqual([[0, 2]]);
    const both = read(
      `${hexRecord(3, 0, [0x12, 0x34, 0, 5])}\n${hexRecord(5, 0, [0, 0, 0x23, 5])}\n${data(0, 1)}\n${END}`,
    );
    expect([both.startAddress, codes(both)]).toEqual([0x2305, ["two_start_addresses"]]);
  });
  it("sparse over 4 GiB costs memory for its bytes only", () => {
    const before = process.memoryUsage().arrayBuffers;
    const image = read(`${data(0, 1)}\n${linear(0xffff)}\n${data(0xffff, 2)}\n${END}`);
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(16e6);
    for (const { bytes } of image.segments) expect(bytes.buffer.byteLength).toBeLessThan(16e6);
    expect(layout(image)).toEqual([
      [0, 1],
      [0xffffffff, 1],
    ]);
    expect(changedRanges(image, { segments: [] })).toEqual([
      { address: 0, length: 1, kind: "only a" },
      { address: 0xffffffff, length: 1, kind: "only a" },
    ]);
  });
});

describe("S-record: each odd case of formats.md 1.2", () => {
  const s1 = (address: number, ...bytes: number[]) => sRecord(1, address, bytes);
  const S9 = sRecord(9, 0, []);
  it("S1, S2 and S3 mixed, another end record, lower case and no final line end are read", () => {
    const image = read(
      `${s1(0x10, 1)}\n${sRecord(2, 0x100000, [2])}\n${sRecord(3, 0x80000000, [3])}\n${sRecord(8, 0x1234, [])}`,
    );
    expect(layout(image)).toEqual([
      [0x10, 1],
      [0x100000, 1],
      [0x80000000, 1],
    ]);
    // No checksum covers the digit of the type, so that a mixture is told.
    expect([image.startAddress, codes(image)]).toEqual([0x1234, ["record_types_mixed", "no_header"]]);
    expect(layout(read(`${s1(0x10, 0xab)}\n${S9}`.toLowerCase()))).toEqual([[0x10, 1]]);
  });
  it("missing header and end, data after the end and a header inside are notes", () => {
    expect(codes(read(s1(0, 1)))).toEqual(["no_header", "no_end_record"]);
    const late = read(`${s1(0, 1)}\n${S9}\n${s1(1, 2)}\n${sRecord(0, 0, [72, 105])}`);
    expect([late.header, codes(late), layout(late)]).toEqual([
      "Hi",
      ["data_after_end", "header_inside"],
      [[0, 2]],
    ]);
  });
  it.each([
    [
      "S5 with a wrong count",
      `${s1(0, 1)}\n${sRecord(5, 2, [])}\n${S9}`,
      "record_count_wrong",
      /^Line 2: the file states 2 data records and has 1/,
    ],
    [
      "S6 with a wrong count",
      `${s1(0, 1)}\n${sRecord(6, 0x10001, [])}\n${S9}`,
      "record_count_wrong",
      /^Line 2:/,
    ],
    [
      "S5 with bytes behind its count",
      `${s1(0, 1)}\n${sRecord(5, 1, [5])}\n${S9}`,
      "record_length_wrong",
      /^Line 2:/,
    ],
    ["S4", `${s1(0, 1)}\nS4030000FC\n`, "record_type_unknown", /^Line 2:/],
    [
      "overlap, different bytes",
      `${s1(0, 1, 2)}\n${s1(1, 9)}\n${S9}`,
      "overlap_differs",
      /^Line 2: .* line 1\./,
    ],
    ["wrong length", `S1060000010203\n${S9}`, "record_cut_off", /^Line 1:/],
    ["too long", `${s1(0, 1)}00\n${S9}`, "record_length_wrong", /^Line 1:/],
    ["count below its address", "S10100FE\n", "record_length_wrong", /^Line 1:/],
    ["wrong sum", `S104000001FF\n${S9}`, "checksum_wrong", /^Line 1:/],
    ["a line that is no record", `${s1(0, 1)}\nhello\n${S9}`, "line_not_a_record", /^Line 2:/],
    ["no data", S9, "no_data", /no data record/],
  ])("%s is refused", (_, text, code, message) => {
    const error = refusal(() => read(text));
    expect(error.code).toBe(code);
    expect(error.message).toMatch(message);
  });
  it("right counts S5 and S6 are read", () => {
    expect(codes(read(`${s1(0, 1)}\n${s1(1, 2)}\n${sRecord(5, 2, [])}`))).toEqual([
      "no_header",
      "no_end_record",
    ]);
    expect(layout(read(`${s1(0, 1)}\n${sRecord(6, 1, [])}\n${S9}`))).toEqual([[0, 1]]);
  });
});

describe("raw binary", () => {
  const bytes = new Uint8Array([0, 255, 58, 1]);
  it("needs a base address that keeps it below 2^32", () => {
    expect(refusal(() => readImage(bytes, { fileName: "a.bin" })).code).toBe("base_address_missing");
    expect(layout(readImage(bytes, { fileName: "a.bin", baseAddress: 2 ** 32 - 4 }))).toEqual([
      [2 ** 32 - 4, 4],
    ]);
    for (const baseAddress of [2 ** 32 - 3, -1, 0.5, Number.NaN]) {
      expect(refusal(() => readImage(bytes, { fileName: "a.bin", baseAddress })).code).toBe(
        "address_out_of_range",
      );
    }
  });
  it("a record file's name makes bytes that are no record a refusal, not a binary", () => {
    expect(refusal(() => readImage(bytes, { fileName: "a.hex", baseAddress: 0 })).code).toBe(
      "line_not_a_record",
    );
    expect(refusal(() => readImage(bytes, { fileName: "a.s19", baseAddress: 0 })).code).toBe(
      "line_not_a_record",
    );
  });
  it("an empty file is refused; a base address beside a HEX file is told as not used", () => {
    expect(refusal(() => readImage(new Uint8Array(), { fileName: "a.bin", baseAddress: 0 })).code).toBe(
      "empty_file",
    );
    const image = readImage(ascii(`${data(0, 1)}\n${END}`), { fileName: "a.hex", baseAddress: 0x1000 });
    expect([layout(image), codes(image)]).toEqual([[[0, 1]], ["base_address_not_used"]]);
  });
});
