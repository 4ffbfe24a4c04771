import { describe, expect, it } from "vitest";
import { readLog } from "@/lib/logs/read-log";
import { codesOf, refusalOf } from "@/tests/support/golden-log";
import {
  addPacked,
  section,
  type WrittenData,
  type WrittenGroup,
  writeMdf,
} from "@/tests/support/mdf-writer";

const TIME = { name: "time", type: 2, sync: 1, dataType: 4, byteOffset: 0, bitCount: 64 };
const GROUP: WrittenGroup = {
  channels: [TIME, { name: "x", dataType: 0, byteOffset: 8, bitCount: 8 }],
  dataBytes: 9,
  cycles: 20,
};
const stream = (() => {
  const bytes = new Uint8Array(180);
  for (let i = 0; i < 20; i++) {
    new DataView(bytes.buffer).setFloat64(9 * i, i / 10, true);
    bytes[9 * i + 8] = i;
  }
  return bytes;
})();
const data = (more: Partial<WrittenData> = {}, group: Partial<WrittenGroup> = {}): WrittenData => ({
  groups: [{ ...GROUP, ...group }],
  stream,
  ...more,
});
const refused = (bytes: Uint8Array) => refusalOf(() => readLog(bytes));

describe("a file that contradicts itself is refused", () => {
  it.each([
    ["data groups in a loop", 0, 0],
    ["data groups that lead back to the head", 0, "head"],
    ["a channel group in place of data", 2, 1],
  ] as const)("%s", (_, index, to) => {
    const bytes = writeMdf([data()], {}, (w, [dg]) =>
      w.link(dg, index, to === "head" ? 64 : to === 0 ? dg : 64 + 1),
    );
    expect(refused(bytes)).toBe("file_damaged");
  });
  it("lists of data blocks in a loop, and one block listed twice", () => {
    const loop = writeMdf([data()], {}, (w, [dg]) => {
      const dl = w.add("DL", [0, 0], new Uint8Array(16));
      w.link(dl, 0, dl);
      w.link(dg, 2, dl);
    });
    const twice = writeMdf([data()], {}, (w, [dg]) => {
      const dt = w.add("DT", [], stream);
      w.link(dg, 2, w.add("DL", [0, dt, dt], new Uint8Array(16)));
    });
    expect([refused(loop), refused(twice)]).toEqual(["file_damaged", "file_damaged"]);
  });
  it.each([2 ** 31, 2 ** 52, 8 * 2 ** 60])("a link to byte %d", (to) => {
    expect(refused(writeMdf([data()], {}, (w, [dg]) => w.link(dg, 1, to)))).toBe("file_damaged");
  });
  it("a block that says it has 2^40 links or bytes", () => {
    for (const at of [8, 16]) {
      const bytes = writeMdf([data()]);
      new DataView(bytes.buffer).setBigUint64(64 + at, 2n ** 40n, true);
      expect(refused(bytes)).toBe("file_damaged");
    }
  });
  it("every length of a file that was cut off ends in a refusal, never in fewer rows", () => {
    const whole = writeMdf([data()]);
    for (let length = 0; length < whole.length - 8; length += 7) {
      expect(refused(whole.subarray(0, length)), `${length} bytes`).not.toBe("read");
    }
  });
});

describe("packed data are bounded before they are unpacked", () => {
  const packed = (options: Parameters<typeof addPacked>[2], plain = stream) =>
    writeMdf([data()], {}, (w, [dg]) => w.link(dg, 2, addPacked(w, plain, options)));
  it("10 GB declared: refused at once", () => {
    expect(refused(packed({ statedBytes: 1e10 }))).toBe("inflates_too_large");
  });
  it("more than deflate can pack into so few bytes: refused before unpacking", () => {
    expect(refused(packed({ statedBytes: 2e8 }))).toBe("file_damaged");
  });
  it.each([179, 181])("%d bytes stated where 180 are packed", (statedBytes) => {
    expect(refused(packed({ statedBytes }))).toBe("file_damaged");
  });
  it("a bomb that keeps its word (40 MB in 40 kB) is held against the bound of the call", () => {
    const bomb = packed({}, new Uint8Array(40e6));
    expect(bomb.length).toBeLessThan(60_000);
    expect(refusalOf(() => readLog(bomb, { maxInflatedBytes: 10e6 }))).toBe("inflates_too_large");
  });
  it("many channels over the same few bytes do not claim memory", () => {
    const x = GROUP.channels[1];
    const channels = [
      TIME,
      ...Array.from({ length: 1900 }, (_, i) => ({ ...x, name: `x${i}`, byteOffset: 0 })),
    ];
    const wide = writeMdf([
      data({ stream: new Uint8Array(9e6), form: "deflate", blockBytes: 9e6 }, { channels, cycles: 1e6 }),
    ]);
    expect(wide.length).toBeLessThan(1e6);
    expect(refused(wide)).toBe("too_many_values");
  });
  it("2,001 channels", () => {
    const channels = Array.from({ length: 2001 }, () => GROUP.channels[1]);
    expect(refused(writeMdf([data({}, { channels })]))).toBe("too_many_columns");
  });
  it.each([2, 3, 4, 5, 9])("packing method %d is refused by name", (zip) => {
    expect(refused(packed({ zip }))).toBe("format_not_supported");
  });
});

describe("what is not read is said", () => {
  it.each([300, 330, 500])("version %d is refused by name", (version) => {
    expect(refused(writeMdf([data()], { version }))).toBe("format_not_supported");
  });
  it("values stored by column are refused by name", () => {
    const bytes = writeMdf([data()], {}, (w, [dg]) => w.link(dg, 2, w.add("LD", [0, 0], new Uint8Array(16))));
    expect(refused(bytes)).toBe("format_not_supported");
  });
  it("raw bus frames, a group without time and one whose time lies elsewhere are left out, the rest is read", () => {
    const files = [
      data({}, { flags: 2 }),
      data({}, { channels: [GROUP.channels[1]] }),
      data({}, { channels: [GROUP.channels[1]], flags: 8 }),
      data(),
    ];
    const table = readLog(writeMdf(files));
    expect(table.rowsRead).toBe(20);
    expect(codesOf(table)).toEqual(["bus_frames_left_out", "group_without_time", "group_without_time"]);
    expect(table.leftOut).toEqual(["time", "x", "x", "x"]);
  });
  it("a file without any time is refused", () => {
    expect(refused(writeMdf([data({}, { channels: [GROUP.channels[1]] })]))).toBe("no_time_column");
  });
  it.each([
    [25, "records_missing", 20],
    [15, "records_not_counted", 15],
  ])("a count of %d over 20 records is told", (cycles, code, rows) => {
    const table = readLog(writeMdf([data({}, { cycles })]));
    expect([codesOf(table), table.rowsRead]).toEqual([[code], rows]);
  });
  it("a record of an unknown kind in mixed records is refused; a cut one at the end is told", () => {
    const ids = new Uint8Array(200).map((_, i) =>
      i % 10 === 0 ? 1 : stream[9 * Math.floor(i / 10) + (i % 10) - 1],
    );
    const mixed = (bytes: Uint8Array) =>
      writeMdf([data({ idBytes: 1, stream: bytes }, { recordId: 1, cycles: 19 })]);
    expect(refused(mixed(ids.map((v, i) => (i === 100 ? 7 : v))))).toBe("file_damaged");
    const table = readLog(mixed(ids.subarray(0, 195)));
    expect([codesOf(table), table.rowsRead]).toEqual([["records_cut_off"], 19]);
  });
});

describe("blocks that all claim the same eight megabytes as their links", () => {
  /** A thousand channels; every block of a kind says that it goes on to the end of the file. */
  const claiming = (id: string) => {
    const channels = Array.from({ length: 1000 }, (_, k) => ({
      name: `c${k}`,
      dataType: 0,
      byteOffset: 8,
      bitCount: 8,
    }));
    const plain = writeMdf([data({}, { channels: [TIME, ...channels] })]);
    const bytes = new Uint8Array(plain.length + (8 << 20));
    bytes.set(plain);
    const view = new DataView(bytes.buffer);
    for (let at = 64; at < plain.length; at += 8) {
      if (String.fromCharCode(...bytes.subarray(at, at + 4)) !== `##${id}`) continue;
      const links = Math.floor((bytes.length - at - 256) / 8);
      view.setBigUint64(at + 8, BigInt(bytes.length - at), true);
      view.setBigUint64(at + 16, BigInt(links), true);
    }
    return bytes;
  };
  it.each([
    ["CN", "file_damaged"],
    ["TX", "read"],
  ])("%s: %s, at once", (id, outcome) => {
    const bytes = claiming(id);
    const began = performance.now();
    expect(refused(bytes)).toBe(outcome);
    // No measure of speed: work that grows with the claim would take minutes.
    expect(performance.now() - began).toBeLessThan(20_000);
  });
});

describe("files that their logger did not finish", () => {
  const open = (unfinished: number, more: Partial<WrittenData> = {}, custom = 0) =>
    writeMdf([data(more, { cycles: 0 })], { unfinished, custom }, (w, [dg]) => {
      // The data block is written last and its length was never filled in.
      if (unfinished & 4) w.link(dg, 2, w.add("DT", [], stream, 24));
    });
  it("counts (1) and the last length (4) follow from the bytes: every whole record is read, told", () => {
    for (const flags of [1, 5]) {
      const table = readLog(open(flags));
      expect([table.rowsRead, codesOf(table)]).toEqual([20, ["file_not_finished"]]);
    }
    const cut = open(5).subarray(0, -10);
    expect(readLog(cut).rowsRead).toBe(19);
  });
  it.each([2, 8, 16, 32, 64, 128])("flag %d is refused by name", (flag) => {
    expect(refused(open(flag))).toBe("format_not_supported");
  });
  it("what only its logger knows, mixed records, and data that are not at the end are refused by name", () => {
    expect(refused(open(1, {}, 1))).toBe("format_not_supported");
    expect(refused(open(1, { idBytes: 1 }))).toBe("format_not_supported");
    const behind = writeMdf([data({}, { cycles: 0 })], { unfinished: 5 }, (w, [dg]) => {
      w.link(
        dg,
        0,
        w.add(
          "DG",
          [0, 0, 0, 0],
          section(8, () => undefined),
        ),
      );
    });
    expect(refused(behind)).toBe("format_not_supported");
  });
});
