import { describe, expect, it } from "vitest";
import { InstanceCollector } from "@/lib/calibration/cdf/collect-instances";
import { readCdfx } from "@/lib/calibration/cdf/read-cdfx";
import { CDF_REFUSALS } from "@/lib/calibration/cdf/types";
import { FileRefusedError } from "@/lib/errors";

const utf8 = (text: string) => new TextEncoder().encode(text);
/** One byte a character: what an editor saves as Latin-1. */
const latin1 = (text: string) => Uint8Array.from(text, (sign) => sign.charCodeAt(0));
const refusal = (bytes: Uint8Array): FileRefusedError => {
  try {
    readCdfx(bytes);
  } catch (error) {
    if (!(error instanceof FileRefusedError)) throw error;
    expect(CDF_REFUSALS).toContain(error.code);
    return error;
  }
  throw new Error("was read");
};
const tree = (instances: string, head = "") =>
  `${head}<MSRSW><SHORT-NAME>file</SHORT-NAME><SW-SYSTEMS><SW-SYSTEM><SHORT-NAME>s</SHORT-NAME><SW-INSTANCE-SPEC><SW-INSTANCE-TREE><SHORT-NAME>t</SHORT-NAME><CATEGORY>NO_VCD</CATEGORY>${instances}</SW-INSTANCE-TREE></SW-INSTANCE-SPEC></SW-SYSTEM></SW-SYSTEMS></MSRSW>`;
const variant = (inside: string) =>
  `<SW-INSTANCE-PROPS-VARIANTS><SW-INSTANCE-PROPS-VARIANT>${inside}</SW-INSTANCE-PROPS-VARIANT></SW-INSTANCE-PROPS-VARIANTS>`;
const named = (name: string, category: string, inside: string) =>
  `<SW-INSTANCE><SHORT-NAME>${name}</SHORT-NAME><LONG-NAME>long ${name}</LONG-NAME><CATEGORY>${category}</CATEGORY>${inside}</SW-INSTANCE>`;
const values = (phys: string, before = "") =>
  `<SW-VALUE-CONT>${before}<SW-VALUES-PHYS>${phys}</SW-VALUES-PHYS></SW-VALUE-CONT>`;
const plain = (name: string, category: string, phys: string, before = "") =>
  named(name, category, variant(values(phys, before)));
const one = (instance: string) => {
  const file = readCdfx(utf8(tree(instance)));
  expect(file.instances).toHaveLength(1);
  return { ...file.instances[0], problems: file.problems, notes: file.notes };
};

// The layouts are those of ASAM CDF 2.0 as sample files have them: Latin-1 with CRLF, a document type, labels first in groups.
describe("reading a values file", () => {
  it("Latin-1, CRLF and a document type: read, nothing fetched, and told", () => {
    const text = tree(
      plain("T.coolant", "VALUE", "<V>-50.25</V>", "<UNIT-DISPLAY-NAME>\u00b0C</UNIT-DISPLAY-NAME>"),
      '<?xml version="1.0" encoding="ISO-8859-1"?>\n<!DOCTYPE MSRSW PUBLIC "-//ASAM//DTD CDF//EN" "http://example.invalid/cdf_v2.0.0.sl.dtd">\n',
    ).replaceAll("\n", "\r\n");
    const file = readCdfx(latin1(text));
    expect(file.instances).toEqual([
      {
        name: "T.coolant",
        text: "long T.coolant",
        category: "VALUE",
        unit: "\u00b0C",
        dims: [],
        values: [-50.25],
        axes: [],
        functions: [],
      },
    ]);
    expect(file.notes).toEqual([expect.stringMatching(/document type; nothing was fetched/)]);
    expect(file.problems).toEqual([]);
  });
  it("bytes that are no UTF-8 though nothing else is stated: Windows-1252, with a note", () => {
    const file = readCdfx(latin1(tree(plain("a", "VALUE", "<VT>1 \u00b0</VT>"))));
    expect([file.instances[0].values, file.notes]).toEqual([
      ["1 \u00b0"],
      [expect.stringMatching(/states no encoding and is no UTF-8/)],
    ]);
  });
  it("UTF-16 and UTF-8 with a mark", () => {
    const text = tree(plain("a", "VALUE", "<VT>\u00b5</VT>"));
    const wide = Uint8Array.from([
      0xff,
      0xfe,
      ...new Uint8Array(Uint16Array.from(text, (s) => s.charCodeAt(0)).buffer),
    ]);
    for (const bytes of [wide, wide.subarray(2), Uint8Array.from([0xef, 0xbb, 0xbf, ...utf8(text)])])
      expect(readCdfx(bytes)).toMatchObject({ instances: [{ values: ["\u00b5"] }], notes: [] });
  });
  it("values directly below the instance are read like those below its variant", () => {
    const inside = values("<V>1</V><V>2</V>");
    expect(one(named("c", "CURVE", inside))).toEqual(one(named("c", "CURVE", variant(inside))));
    expect(one(named("c", "CURVE", inside))).toMatchObject({ dims: [2], values: [1, 2] });
  });
  it("groups with a label first: x runs fastest, cuboids nest", () => {
    const map = one(
      plain(
        "m",
        "MAP",
        "<VG><LABEL>10</LABEL><V>1</V><V>2</V><V>3</V></VG><VG><LABEL>20</LABEL><V>4</V><V>5</V><VF>6</VF></VG>",
      ),
    );
    expect(map).toMatchObject({ dims: [3, 2], values: [1, 2, 3, 4, 5, 6], problems: [], notes: [] });
    const plane = (a: number) =>
      `<VG><VG><V>${a}</V></VG><VG><V>${a + 1}</V></VG><VG><V>${a + 2}</V></VG></VG>`;
    expect(one(plain("k", "CUBOID", plane(1) + plane(4)))).toMatchObject({
      dims: [1, 3, 2],
      values: [1, 2, 3, 4, 5, 6],
    });
  });
  it("axes by value, by reference and as pairs; their order is that of their index", () => {
    const axes = `<SW-AXIS-CONTS><SW-AXIS-CONT><CATEGORY>COM_AXIS</CATEGORY><SW-AXIS-INDEX>2</SW-AXIS-INDEX><SW-INSTANCE-REF>load.axis</SW-INSTANCE-REF></SW-AXIS-CONT><SW-AXIS-CONT><CATEGORY>STD_AXIS</CATEGORY><UNIT-DISPLAY-NAME>1/min</UNIT-DISPLAY-NAME><SW-AXIS-INDEX>1</SW-AXIS-INDEX><SW-VALUES-PHYS><V>800</V><V>6.4e3</V></SW-VALUES-PHYS></SW-AXIS-CONT></SW-AXIS-CONTS>`;
    const map = one(
      named(
        "m",
        "MAP",
        `<SW-FEATURE-REF>ignition</SW-FEATURE-REF>${variant(values("<VG><V>1</V><V>2</V></VG>") + axes)}`,
      ),
    );
    expect(map.axes).toEqual([
      { category: "STD_AXIS", reference: null, unit: "1/min", values: [800, 6400] },
      { category: "COM_AXIS", reference: "load.axis", unit: "", values: [] },
    ]);
    expect([map.functions, map.dims, map.unit]).toEqual([["ignition"], [2, 1], ""]);
    const pairs = "<VG><V>0</V><V>0</V></VG><VG><V>40</V><V>4</V></VG><VG><V>85</V><V>8</V></VG>";
    expect(one(plain("r", "RES_AXIS", pairs))).toMatchObject({ dims: [2, 3], values: [0, 0, 40, 4, 85, 8] });
  });
  it("texts, words and unknown categories are plain values", () => {
    expect(one(plain("b", "BOOLEAN", "<VT>true</VT>"))).toMatchObject({ dims: [], values: ["true"] });
    expect(one(plain("d", "DEPEDNDENT_VALUE", "<V> 4 </V>"))).toMatchObject({
      dims: [],
      values: [4],
      problems: [],
    });
    expect(one(plain("a", "ASCII", "<VT>  1 &lt; 2 <![CDATA[& more]]></VT>")).values).toEqual([
      "  1 < 2 & more",
    ]);
    expect(one(plain("c", "CURVE", "<V>1</V>")).dims).toEqual([1]);
  });
  it("a stated size shapes flat values; ones at its end are left out", () => {
    const size = (...n: number[]) => `<SW-ARRAYSIZE>${n.map((v) => `<V>${v}</V>`).join("")}</SW-ARRAYSIZE>`;
    const six = "<V>1</V><V>2</V><V>3</V><V>4</V><V>5</V><V>6</V>";
    expect(one(plain("v", "VAL_BLK", six, size(3, 2, 1)))).toMatchObject({ dims: [3, 2], problems: [] });
    expect(one(plain("v", "VAL_BLK", six, size(4, 2)))).toMatchObject({
      dims: [6],
      problems: ["v states the size 4 × 2 and holds 6 values."],
    });
  });
  it("what contradicts itself is told by name, and the rest is read", () => {
    const uneven = one(plain("m", "MAP", "<VG><V>1</V><V>2</V></VG><VG><V>3</V></VG>"));
    expect([uneven.dims, uneven.values, uneven.problems]).toEqual([
      [3],
      [1, 2, 3],
      ["m has groups of unequal size; its values were read as one row."],
    ]);
    expect(one(plain("n", "VALUE", "<V>NaN</V>"))).toMatchObject({
      values: [null],
      problems: ['n holds "NaN", which is no number.'],
    });
    const twice = readCdfx(utf8(tree(plain("x", "VALUE", "<V>1</V>") + plain("x", "VALUE", "<V>2</V>"))));
    expect(twice.problems).toEqual(["x is there more than once."]);
    expect(one(named("e", "VALUE", "")).problems).toEqual(["e has no values."]);
    const second = `<SW-INSTANCE-PROPS-VARIANTS>${["1", "2"].map((v) => `<SW-INSTANCE-PROPS-VARIANT>${values(`<V>${v}</V>`)}</SW-INSTANCE-PROPS-VARIANT>`).join("")}</SW-INSTANCE-PROPS-VARIANTS>`;
    expect(one(named("p", "VALUE", second))).toMatchObject({
      values: [1],
      problems: ["p has more than one variant; only the first was read."],
    });
  });
  it("coded values and kinds that are not known are told, parts of a structure carry its name", () => {
    const coded = "<SW-VALUE-CONT><SW-VALUES-CODED><V>7</V></SW-VALUES-CODED></SW-VALUE-CONT>";
    expect(one(named("c", "VALUE", coded))).toMatchObject({
      values: [],
      notes: [expect.stringMatching(/^Coded/)],
    });
    expect(one(plain("q", "VALUE", "<VX>7</VX><V>1</V>"))).toMatchObject({
      values: [1],
      notes: [expect.stringMatching(/kind VX/)],
    });
    const parts = readCdfx(utf8(tree(named("s", "", plain("part", "VALUE", "<V>1</V>")))));
    expect(parts.instances.map(({ name }) => name)).toEqual(["s.part"]);
  });
});

describe("what is refused", () => {
  it.each<[string, Uint8Array, string, RegExp]>([
    ["an empty file", new Uint8Array(), "empty_file", /empty/],
    ["no XML", utf8("hello"), "file_damaged", /^Line 1:/],
    ["a cut-off file", utf8(tree(plain("a", "VALUE", "<V>1</V>")).slice(0, -40)), "file_damaged", /^Line 1:/],
    ["an element closed wrongly", utf8("<MSRSW>\n<A></B></MSRSW>"), "file_damaged", /^Line 2:/],
    ["another XML", utf8("<gpx></gpx>"), "not_cdf", /no MSRSW/],
    [
      "an unknown encoding",
      utf8('<?xml version="1.0" encoding="x-none"?><MSRSW/>'),
      "encoding_unknown",
      /"x-none"/,
    ],
    [
      "bytes outside the stated encoding",
      Uint8Array.from([0xff, 0xfe, 0x3c, 0, 0, 0xd8, 0x3c, 0]),
      "not_text",
      /utf-16le/,
    ],
    [
      "entities that unfold",
      utf8(
        tree(
          plain("a", "VALUE", "<VT>&b;</VT>"),
          '<!DOCTYPE MSRSW [<!ENTITY a "xxxxxxxx"><!ENTITY b "&a;&a;&a;&a;">]>',
        ),
      ),
      "file_damaged",
      /entity/i,
    ],
    [
      "an entity of a file",
      utf8('<!DOCTYPE M [<!ENTITY f SYSTEM "file:///etc/hostname">]><MSRSW>&f;</MSRSW>'),
      "file_damaged",
      /entity/i,
    ],
    ["nesting without end", utf8(`<MSRSW>${"<VG>".repeat(100_000)}`), "file_damaged", /more than 64 deep/],
  ])("%s", (_, bytes, code, message) => {
    const error = refusal(bytes);
    expect(error.code).toBe(code);
    expect(error.message).toMatch(message);
  });
  it("more values than any calibration has", () => {
    const collector = new InstanceCollector(5);
    for (const name of ["SW-INSTANCE", "SW-VALUES-PHYS"]) collector.open(name);
    const add = () => {
      collector.open("V");
      collector.text("1");
      collector.close();
    };
    for (let k = 0; k < 5; k++) add();
    expect(add).toThrow(/more than 5 values/);
  });
  it("problems without end are counted, not all kept", () => {
    const { problems } = readCdfx(utf8(tree(plain("a", "CURVE", "<V>x</V>".repeat(5000)))));
    expect(problems).toHaveLength(201);
    expect(problems[200]).toBe("4800 further problems are not listed.");
  });
});
