import fc from "fast-check";
import { describe, expect, it, vi } from "vitest";
import { readDescription } from "@/lib/calibration/a2l/read-description";
import { firstRangeAt } from "@/lib/calibration/values/convert/first-range";
import { readImageByDescription } from "@/lib/calibration/values/read-image-by-description";
import type { ImageReading } from "@/lib/calibration/values/types";

vi.setConfig({ testTimeout: 120_000 });

/** CPU time for one made-up description; without a bound most of these took from twelve seconds to minutes. */
const MOST_CPU_MS = 8000;

const list = (n: number, text: (k: number) => string) =>
  Array.from({ length: n }, (_, k) => text(k)).join("\n");

function read(body: string, bytes: Uint8Array): ImageReading & { listed: string[] } {
  const text = `/begin PROJECT P "" /begin MODULE M ""
/begin MOD_COMMON "" BYTE_ORDER MSB_LAST /end MOD_COMMON
/begin RECORD_LAYOUT B FNC_VALUES 1 UBYTE ROW_DIR DIRECT /end RECORD_LAYOUT
/begin RECORD_LAYOUT W FNC_VALUES 1 UWORD ROW_DIR DIRECT /end RECORD_LAYOUT
${body} /end MODULE /end PROJECT`;
  const before = process.cpuUsage();
  const description = readDescription([{ name: "made.a2l", bytes: new TextEncoder().encode(text) }]);
  const listed = [
    ...description.notRead.map(({ reason }) => reason),
    ...description.notes.map((n) => n.message),
  ];
  const reading = readImageByDescription(description, { segments: [{ address: 0, bytes }] });
  const { user, system } = process.cpuUsage(before);
  expect((user + system) / 1000).toBeLessThan(MOST_CPU_MS);
  return { ...reading, listed };
}
const value = (name: string, layout = "B") =>
  `/begin CHARACTERISTIC ${name} "" VALUE 0 ${layout} 0 NO_COMPU_METHOD 0 255 /end CHARACTERISTIC`;

describe("descriptions made to be slow are read in bounded time", () => {
  it("many ranges of words and many cells", () => {
    const n = 30_000;
    const { characteristics } = read(
      `/begin COMPU_METHOD C "" TAB_VERB "%3" "" COMPU_TAB_REF T /end COMPU_METHOD
/begin COMPU_VTAB_RANGE T "" ${n} ${list(n, (k) => `${2 * k} ${2 * k + 1} "w${k}"`)} /end COMPU_VTAB_RANGE
/begin CHARACTERISTIC V "" VAL_BLK 0 W 0 C 0 65535 MATRIX_DIM 500000 /end CHARACTERISTIC`,
      new Uint8Array(1_000_000).fill(0xd0),
    );
    // 0xD0D0 = 53,456 lies in the range of 53,456 and 53,457, number 26,728.
    expect(characteristics[0].values[499_999]).toBe("w26728");
  });

  it("many cells on many rescale pairs", () => {
    const pairs = 16_000;
    const words = new Uint16Array(50_000);
    for (let k = 0; k < pairs; k++) words.set([k, k === pairs - 1 ? 65_000 : k], 2 * k);
    const axis = `/begin AXIS_DESCR RES_AXIS NO_INPUT_QUANTITY NO_COMPU_METHOD 65001 0 65535 AXIS_PTS_REF A /end AXIS_DESCR`;
    const { characteristics } = read(
      `/begin RECORD_LAYOUT R AXIS_RESCALE_X 1 UWORD ${pairs} INDEX_INCR DIRECT /end RECORD_LAYOUT
/begin AXIS_PTS A "" 0 NO_INPUT_QUANTITY R 0 NO_COMPU_METHOD ${pairs} 0 65535 /end AXIS_PTS
${list(10, (k) => `/begin CHARACTERISTIC V${k} "" CURVE 0 B 0 NO_COMPU_METHOD 0 255 ${axis} /end CHARACTERISTIC`)}`,
      new Uint8Array(words.buffer),
    );
    const [{ points }] = characteristics[1].axes;
    // Cell k lies at value k up to the last pair but one; from there a straight line leads to (15,999; 65,000).
    expect([points[7], points[15_998], points[65_000]]).toEqual([7, 15_998, 15_999]);
  });

  it("a layout of very many components", () => {
    const layout = `/begin RECORD_LAYOUT L FNC_VALUES 1 UBYTE ROW_DIR DIRECT ${list(50_000, (k) => `RESERVED ${k + 2} BYTE`)} /end RECORD_LAYOUT`;
    const { notRead, listed } = read(
      `${layout} ${list(5000, (k) => value(`V${k}`, "L"))}`,
      new Uint8Array(8),
    );
    expect(listed[0]).toMatch(/more than 256 components/);
    expect(notRead).toHaveLength(5000);
  });

  it("a long chain of groups, each with a member", () => {
    const { characteristics, problems } = read(
      list(
        8000,
        (k) =>
          `/begin GROUP g${k} "" /begin SUB_GROUP g${k + 1} /end SUB_GROUP /begin REF_CHARACTERISTIC V${k} /end REF_CHARACTERISTIC /end GROUP ${value(`V${k}`)}`,
      ),
      new Uint8Array(8),
    );
    expect(characteristics).toHaveLength(8000);
    expect(characteristics.every(({ name, groups }) => groups[0] === name.replace("V", "g"))).toBe(true);
    expect(problems.join()).toMatch(/outer ones are not put/);
  });

  it("very many addresses of a long EPK", () => {
    const modPar = `/begin MOD_PAR "" EPK "${"A".repeat(4096)}" ${list(50_000, (k) => `ADDR_EPK ${k}`)} /end MOD_PAR`;
    const { epk, listed } = read(modPar, new Uint8Array(1 << 20).fill(65));
    expect(epk.state).toBe("match");
    expect(listed.join()).toMatch(/more than 100 addresses of the EPK/);
  });

  it("very many memory segments, of which one spans all", () => {
    const segment = (name: string, address: number, length: number) =>
      `/begin MEMORY_SEGMENT ${name} "" DATA FLASH INTERN ${address} ${length} -1 -1 -1 -1 -1 /end MEMORY_SEGMENT`;
    const modPar = `/begin MOD_PAR "" ${segment("all", 0, 2 ** 32)} ${list(5000, (k) => segment(`s${k}`, k, 1))} /end MOD_PAR`;
    const { memorySegments, problems } = read(modPar, new Uint8Array(8));
    expect(memorySegments).toHaveLength(1000);
    expect(problems).toHaveLength(1);
  });

  it("long names and words that are said again and again stay within what one text can hold", () => {
    const long = "L".repeat(1_000_000);
    const blocks = list(
      20,
      (k) => `/begin CHARACTERISTIC V${k} "" VAL_BLK 0 B 0 C 0 255 MATRIX_DIM 10 /end CHARACTERISTIC`,
    );
    const words = read(
      `/begin COMPU_METHOD C "" TAB_VERB "%3" "" COMPU_TAB_REF T /end COMPU_METHOD
/begin COMPU_VTAB T "" TAB_VERB 1 0 "${long}" /end COMPU_VTAB ${blocks}`,
      new Uint8Array(16),
    );
    // Ten million letters of words each, and a few of the name: the fifth would pass fifty million.
    expect([words.characteristics.length, words.notRead.length]).toEqual([4, 16]);
    expect(words.notRead[0].reason).toMatch(/longer than 50000000 letters/);
    const reasons = read(
      list(20, (k) => value(`V${k}`, long)),
      new Uint8Array(8),
    ).notRead;
    expect(reasons).toHaveLength(20);
    expect(JSON.stringify(reasons).length).toBeLessThan(20_000);
  });
});

describe("the first of many ranges", () => {
  it("is the one that looking through all of them finds", () => {
    const end = fc.oneof(fc.integer({ min: -6, max: 6 }), fc.double({ min: -6, max: 6, noNaN: true }));
    const range = fc.tuple(end, end).map(([a, b]) => ({ from: Math.min(a, b), to: Math.max(a, b) }));
    fc.assert(
      fc.property(fc.array(range, { maxLength: 12 }), fc.array(end), (ranges, more) => {
        const at = firstRangeAt(ranges);
        for (const value of [...more, ...ranges.flatMap(({ from, to }) => [from, to]), Number.NaN, Infinity])
          expect(at(value)).toBe(ranges.find(({ from, to }) => from <= value && value <= to));
      }),
    );
  });
});
