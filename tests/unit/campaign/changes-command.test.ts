import { spawnSync } from "node:child_process";
import { createHash } from "node:crypto";
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { gunzipSync } from "node:zlib";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { hexRecord, records, sRecord } from "../../support/record-files";

vi.setConfig({ testTimeout: 180_000 });

const ROOT = fileURLToPath(new URL("../../..", import.meta.url));
const golden = (path: string) => gunzipSync(readFileSync(join(ROOT, "tests/golden", path)));
let folder = "";

/** Runs the command; names of files are those in the test's folder. */
function changes(...args: string[]) {
  const tsx = join(ROOT, "node_modules/tsx/dist/cli.mjs");
  const paths = args.map((arg) => (arg.includes(".") ? join(folder, arg) : arg));
  const run = spawnSync(process.execPath, [tsx, join(ROOT, "lib/campaign/changes.ts"), ...paths], {
    cwd: ROOT,
    encoding: "utf8",
    maxBuffer: 1 << 28,
  });
  return { status: run.status, out: run.stdout, err: run.stderr };
}

const A2L = `ASAP2_VERSION 1 71
/begin PROJECT P "" /begin MODULE M ""
  /begin MOD_COMMON "" BYTE_ORDER MSB_LAST /end MOD_COMMON
  /begin MOD_PAR "" /begin MEMORY_SEGMENT Cal "" DATA FLASH INTERN 0x810000 0x40 -1 -1 -1 -1 -1 /end MEMORY_SEGMENT /end MOD_PAR
  /include "more.a2l"
  /begin CHARACTERISTIC Boost "" MAP 0x810000 L 0 Tenth 0 20
    /begin AXIS_DESCR FIX_AXIS NO_INPUT_QUANTITY NO_COMPU_METHOD 2 0 9000 FIX_AXIS_PAR_DIST 1000 1500 2 /end AXIS_DESCR
    /begin AXIS_DESCR FIX_AXIS NO_INPUT_QUANTITY NO_COMPU_METHOD 2 0 200 FIX_AXIS_PAR_DIST 40 80 2 /end AXIS_DESCR
  /end CHARACTERISTIC
  /begin CHARACTERISTIC Label "" ASCII 0x810004 L 0 NO_COMPU_METHOD 0 255 NUMBER 4 /end CHARACTERISTIC
  /begin CHARACTERISTIC Far "" VALUE 0x900000 L 0 NO_COMPU_METHOD 0 255 /end CHARACTERISTIC
/end MODULE /end PROJECT`;
const MORE = `/begin COMPU_METHOD Tenth "" LINEAR "%5.1" "kPa" COEFFS_LINEAR 0.1 0 /end COMPU_METHOD
  /begin RECORD_LAYOUT L FNC_VALUES 1 UBYTE ROW_DIR DIRECT /end RECORD_LAYOUT`;
const BEFORE = [100, 110, 120, 142, 0x41, 0x42, 0, 0, 9, 9, 9, 9];
const AFTER = [100, 110, 120, 250, 0x41, 0x43, 0, 0, 9, 9, 7, 9];
const segment = (bytes: number[]) => [{ address: 0x810000, bytes: Uint8Array.from(bytes) }];

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "twinpass-changes-"));
  const hex = (bytes: number[]) =>
    [
      hexRecord(4, 0, [0x00, 0x81]),
      ...records(segment(bytes), 16).map(({ address, data }) => hexRecord(0, address % 65536, data)),
      ":00000001FF",
    ].join("\n");
  writeFileSync(join(folder, "a.hex"), hex(BEFORE));
  writeFileSync(
    join(folder, "b.s19"),
    [
      ...records(segment(AFTER), 16).map(({ address, data }) => sRecord(2, address, data)),
      sRecord(8, 0, []),
    ].join("\n"),
  );
  writeFileSync(join(folder, "b.bin"), Uint8Array.from(AFTER));
  writeFileSync(join(folder, "ecu.a2l"), A2L);
  writeFileSync(join(folder, "more.a2l"), MORE);
  writeFileSync(join(folder, "demo.hex"), golden("images/ASAP2_Demo_V171.hex.gz"));
  writeFileSync(join(folder, "demo.a2l"), golden("descriptions/ASAP2_Demo_V171.a2l.gz"));
  writeFileSync(join(folder, "cut.hex"), hex(BEFORE).replace(/\n[^\n]*$/, ""));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

describe("npm run changes", () => {
  it("prints the images, the changed cells and what nobody described", () => {
    const { status, out, err } = changes("a.hex", "b.s19", "--description", "ecu.a2l", "more.a2l");
    expect([status, err]).toEqual([0, ""]);
    const result = JSON.parse(out);
    const sha = (bytes: Uint8Array) => createHash("sha256").update(bytes).digest("hex");
    // Identity: address and length as 64-bit big endian, then the bytes.
    const head = Buffer.alloc(16);
    head.writeBigUInt64BE(0x810000n, 0);
    head.writeBigUInt64BE(12n, 8);
    expect(result.a).toMatchObject({
      container: "intel-hex",
      sha256: sha(readFileSync(join(folder, "a.hex"))),
      identity: sha(Buffer.concat([head, Buffer.from(BEFORE)])),
      segments: [{ address: "0x810000", length: 12, sha256: sha(Uint8Array.from(BEFORE)) }],
    });
    expect(result.b.container).toBe("s-record");
    const byName = Object.fromEntries(result.characteristics.map((one: { name: string }) => [one.name, one]));
    expect(byName.Boost).toMatchObject({
      type: "MAP",
      address: "0x810000",
      unit: "kPa",
      cells: 4,
      changed: 1,
      axis_changed: false,
      changes: [
        { index: [1, 1], axis: [2500, 120], before: expect.closeTo(14.2, 9), after: 25, limit: "above" },
      ],
    });
    expect(byName.Label).toMatchObject({
      changed: 1,
      changes: [{ index: [], axis: [], before: "AB", after: "AC" }],
    });
    expect(result.characteristics).toHaveLength(2);
    expect(result.uncovered).toEqual([
      expect.objectContaining({ address: "0x81000A", length: 1, segment: "Cal" }),
    ]);
    expect(result.not_read).toEqual([
      { name: "Far", reason: "its bytes 0x900000 to 0x900000 are not in the image, which has none there." },
    ]);
    expect(result.problems).toEqual([]);
  });

  it("says the same of the same content in another container, every time", () => {
    const [hex, bin, again] = ["b.s19", "b.bin", "b.bin"].map((name) =>
      JSON.parse(changes("a.hex", name, "--base", "0x810000", "--description", "ecu.a2l", "more.a2l").out),
    );
    expect(bin).toEqual(again);
    expect(bin.b.identity).toBe(hex.b.identity);
    expect(bin.characteristics).toEqual(hex.characteristics);
  });

  it("compares bytes without a description, and by two descriptions", () => {
    const bytes = JSON.parse(changes("a.hex", "b.s19").out);
    expect(bytes).toMatchObject({
      read_by: "none",
      characteristics: [],
      changed_bytes: 3,
      uncovered_bytes: 3,
    });
    const same = JSON.parse(changes("a.hex", "a.hex").out);
    expect(same).toMatchObject({ identical: true, uncovered: [] });
    writeFileSync(
      join(folder, "new.a2l"),
      A2L.replaceAll("Boost", "Pressure").replace('/include "more.a2l"', MORE),
    );
    writeFileSync(join(folder, "old.a2l"), A2L.replace('/include "more.a2l"', MORE));
    const two = JSON.parse(
      changes("a.hex", "b.s19", "--description-a", "old.a2l", "--description-b", "new.a2l").out,
    );
    const kinds = two.characteristics.map(({ name, kind }: { name: string; kind: string }) => [name, kind]);
    expect(kinds.sort()).toEqual([
      ["Boost", "removed"],
      ["Label", "changed"],
      ["Pressure", "added"],
    ]);
    expect(two.read_by).toBe("both");
  });

  it("prints all values by name (values decoded in Python, apart from this reader)", () => {
    const { status, out } = changes("demo.hex", "--description", "demo.a2l", "--values");
    expect(status).toBe(0);
    const { values, not_read } = JSON.parse(out);
    const facts = JSON.parse(golden("descriptions/values.json.gz").toString("utf8")).values;
    for (const name of [
      "ASAM.C.CURVE.STD_AXIS",
      "ASAM.C.MAP.STD_AXIS.STD_AXIS",
      "ASAM.C.SCALAR.SWORD.TAB_VERB_DEFAULT_VALUE",
    ]) {
      const fact = facts[name];
      expect(values[name]).toMatchObject({
        type: fact.type,
        address: fact.address,
        values: fact.phys,
        dims: fact.dims,
      });
      expect(values[name].axes).toEqual((fact.axes ?? []).map(({ phys }: { phys: unknown[] }) => phys));
    }
    expect(values["ASAM.C.ASCII.UBYTE.NUMBER_42"].text).toBe("ASAM Test");
    expect(not_read.map(({ name }: { name: string }) => name)).toContain("ASAM.C.VIRTUAL.REF_1.SWORD");
  });

  it("holds one image against a values file, its differences and what could not be compared (by hand)", () => {
    const instance = (name: string, category: string, values: string) =>
      `<SW-INSTANCE><SHORT-NAME>${name}</SHORT-NAME><CATEGORY>${category}</CATEGORY><SW-VALUE-CONT>
      <UNIT-DISPLAY-NAME>kPa</UNIT-DISPLAY-NAME><SW-VALUES-PHYS>${values}</SW-VALUES-PHYS></SW-VALUE-CONT></SW-INSTANCE>`;
    const boost = (last: string) =>
      instance("Boost", "MAP", `<VG><V>10</V><V>11</V></VG><VG><V>12</V><V>${last}</V></VG>`);
    const others = instance("Far", "VALUE", "<V>1</V>") + instance("Strange", "VALUE", "<V>many</V>");
    writeFileSync(join(folder, "same.cdfx"), `<MSRSW>${boost("14.2")}</MSRSW>`);
    writeFileSync(join(folder, "other.cdfx"), `<MSRSW>${boost("15")}${others}</MSRSW>`);
    const described = ["a.hex", "--description", "ecu.a2l", "more.a2l"];
    const same = JSON.parse(changes(...described, "--cdf", "same.cdfx").out);
    expect(same.cdf).toMatchObject({ compared: 1, equal: 1, values: 4, differences: [], problems: [] });
    expect([same.cdf.not_in_file, same.values]).toEqual([["Label"], undefined]);
    const { status, out } = changes(...described, "--cdf", "other.cdfx", "--values");
    expect(status).toBe(0);
    const { cdf, values } = JSON.parse(out);
    expect(values.Boost.values[3]).toBeCloseTo(14.2, 9);
    const place = { name: "Boost", axis: null, index: [1, 1], unit: "kPa" };
    expect(cdf).toMatchObject({
      ...{ in_file: 3, compared: 1, equal: 0, values: 4, different_values: 1 },
      differences: [
        { ...place, file: 15, image: expect.closeTo(14.2, 9), difference: expect.closeTo(0.8, 9) },
      ],
      not_readable: [{ name: "Far", reason: expect.stringContaining("not in the image") }],
      not_in_image: ["Strange"],
      problems: ['Strange holds "many", which is no number.'],
    });
    const refused = changes(...described, "--cdf", "a.hex");
    expect([refused.status, refused.err.split(":")[0]]).toEqual([1, "file_damaged"]);
  });

  it("names an included file that is missing", () => {
    const result = JSON.parse(changes("a.hex", "b.s19", "--description", "ecu.a2l").out);
    expect(result.problems).toContain(
      "The description includes more.a2l, which was not given. Name it behind --description.",
    );
    expect(result.not_read).toContainEqual({
      name: "Boost",
      reason: "its layout L is not in the description.",
    });
  });

  it("ends with status 1 and a plain sentence where a file is refused, 2 where the call is wrong", () => {
    const refused = changes("a.hex", "cut.hex");
    expect([refused.status, refused.out]).toEqual([1, ""]);
    expect(refused.err).toMatch(/^no_end_record: [A-Z].{20,}\.\n$/s);
    expect(changes("a.hex", "b.bin").err).toMatch(/^base_address_missing: /);
    writeFileSync(join(folder, "odd.a2l"), "/begin PROJECT P");
    expect(changes("a.hex", "b.s19", "--description", "odd.a2l").status).toBe(1);
    for (const args of [
      ["a.hex", "--values"],
      ["a.hex", "--cdf", "same.cdfx"],
      ["a.hex", "b.s19", "c.hex"],
      ["a.hex", "gone.hex"],
    ]) {
      const wrong = changes(...args);
      expect([args, wrong.status]).toEqual([args, 2]);
      expect(wrong.err).toContain("Usage: npm run -s changes");
    }
  });
});
