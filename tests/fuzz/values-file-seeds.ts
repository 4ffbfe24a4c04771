import type { CdfInstance } from "@/lib/calibration/cdf/types";
import { writeCdfx } from "@/lib/calibration/cdf/write-cdfx";
import type { RandomStream } from "@/lib/signal/random";

const plain = { text: "", unit: "°C", functions: ["f"], axes: [] };
const INSTANCES: CdfInstance[] = [
  { ...plain, name: "v", category: "VALUE", dims: [], values: [-1.5e-7] },
  { ...plain, name: "t", category: "ASCII", dims: [], values: [" a < b & c "] },
  { ...plain, name: "b", category: "VAL_BLK", dims: [3, 2], values: [1, 2, 3, 4, 5, 6] },
  { ...plain, name: "r", category: "RES_AXIS", dims: [2, 2], values: [0, 0, 85, 8] },
  {
    ...plain,
    name: "m",
    category: "MAP",
    dims: [2, 2],
    values: [1, 2, "on", 4],
    axes: [
      { category: "STD_AXIS", reference: null, unit: "1/min", values: [800, 900] },
      { category: "RES_AXIS", reference: "r", unit: "", values: [] },
    ],
  },
  { ...plain, name: "k", category: "CUBOID", dims: [1, 2, 2], values: [1, 2, 3, 4] },
];

/** Sound values files of each layout and encoding that the reader knows, from which mutations start. */
export function valuesFileSeeds(): Uint8Array[] {
  const text = [...writeCdfx("seed", INSTANCES)].join("");
  const direct = text.replaceAll(/<\/?SW-INSTANCE-PROPS-VARIANTS?>\n/g, "");
  const old = `<?xml version="1.0" encoding="ISO-8859-1"?>\n<!DOCTYPE MSRSW SYSTEM "cdf.dtd">${direct.slice(direct.indexOf("\n"))}`;
  return [
    new TextEncoder().encode(text),
    Uint8Array.from(old.replaceAll("\n", "\r\n"), (sign) => sign.charCodeAt(0)),
    new Uint8Array(Buffer.from(`\ufeff${text}`, "utf16le")),
  ];
}

const ELEMENTS = [
  "",
  "<V/>",
  "<V>1e999</V>",
  "<VT></VT>",
  "<VG><V>1</V></VG>",
  "<VG></VG>",
  "<VG><VG><VG><V>1</V><VT>a</VT></VG></VG></VG>",
  "<SW-ARRAYSIZE><V>2</V><V>-3</V><V>x</V></SW-ARRAYSIZE>",
  "<SW-ARRAYSIZE><V>1</V></SW-ARRAYSIZE>",
  "<SW-VALUES-PHYS><V>9</V></SW-VALUES-PHYS>",
  "<SW-VALUE-CONT><SW-VALUES-PHYS><VF>7</VF></SW-VALUES-PHYS></SW-VALUE-CONT>",
  "<SW-AXIS-CONT><SW-VALUES-PHYS><V>3</V></SW-VALUES-PHYS></SW-AXIS-CONT>",
  "<SW-INSTANCE><SHORT-NAME>in</SHORT-NAME><SW-VALUES-PHYS><V>2</V></SW-VALUES-PHYS></SW-INSTANCE>",
  "<SW-INSTANCE-PROPS-VARIANT><SW-VALUES-PHYS><V>2</V></SW-VALUES-PHYS></SW-INSTANCE-PROPS-VARIANT>",
  "<CATEGORY>CURVE</CATEGORY>",
  "<SHORT-NAME>v</SHORT-NAME>",
  "<SW-VALUES-CODED><V>1</V></SW-VALUES-CODED>",
  "<![CDATA[<V>]]>",
  "<!-- no -->",
];

/** Replaces, doubles or takes out one to six innermost elements of an UTF-8 file, so that it stays well-formed and says something else. */
export function mutateElements(seed: Uint8Array, random: RandomStream): Uint8Array {
  let text = new TextDecoder().decode(seed);
  for (let changes = 1 + random.nextBelow(6); changes > 0; changes--) {
    const found = [...text.matchAll(/<([\w-]+)>[^<]*<\/\1>/g)];
    if (found.length === 0) break;
    const { 0: element, index } = found[random.nextBelow(found.length)];
    const put = random.nextBelow(4) === 0 ? element + element : ELEMENTS[random.nextBelow(ELEMENTS.length)];
    text = text.slice(0, index) + put + text.slice(index + element.length);
  }
  return new TextEncoder().encode(text);
}
