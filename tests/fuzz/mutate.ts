import type { RandomStream } from "@/lib/signal/random";

/** Pieces of text that steer a reader. */
const TOKENS = [
  ",",
  ";",
  "\t",
  '"',
  "\r\n",
  "\n\n",
  "sep=|\n",
  "\r",
  ",,,,,,,,,,,,,,,,,,,,",
  '""',
  '"\n',
  "\u0000\u0000",
  "Time [s];Tempo;Zeit",
  "[km/h]",
  "(",
  "1.234,5",
  "12,5",
  "+-1",
  ".",
  "1e400",
  "0x1F",
  "1893495600250",
  "23:59:59.999",
  "2030_12_31_23_59_59_999",
  "31.12.2030 23:59:59",
  "--",
  "Inf",
  "NaN",
  "-",
  "1e308",
  "-1e-320",
  "9".repeat(400),
  "1,234.5",
  "24:00:00",
  "1970-01-01T00:00:00Z",
  "\ufeff",
  "\u0000",
  "$GPRMC,",
  "*00",
  "<trkpt lat='1' lon='2'>",
  "</trkseg>",
  "<![CDATA[",
  "&amp;",
  "&x;",
  "<!DOCTYPE a>",
  "##DT",
  "##DZ",
  "##DL",
  "##CN",
  "##CA",
  "/begin ",
  "/end ",
  "/end CHARACTERISTIC",
  "/begin GROUP ",
  '/include "main.a2l"\n',
  "/include part.a2l ",
  "/*",
  "*/",
  "//",
  "\\",
  "MATRIX_DIM 4000000000 ",
  "FIX_AXIS_PAR 0 1 1000000000 ",
  "0xFFFFFFFFFFFFFFFF",
  ":00000001FF",
  ":020000040000FA",
  "S9030000FC",
  "S0030000FC",
].map((text) => new TextEncoder().encode(text));

/** Whole numbers at which sizes, counts and places go wrong. */
const EDGES = [
  0n,
  1n,
  7n,
  8n,
  24n,
  64n,
  255n,
  65_535n,
  2n ** 31n - 1n,
  2n ** 32n,
  2n ** 53n,
  2n ** 63n,
  2n ** 64n - 1n,
];

type Change = (bytes: Uint8Array, random: RandomStream, other: Uint8Array) => Uint8Array;

const joined = (...parts: Uint8Array[]) => new Uint8Array(Buffer.concat(parts));
const replaced = (bytes: Uint8Array, from: number, to: number, by: Uint8Array) =>
  joined(bytes.subarray(0, from), by, bytes.subarray(Math.max(from, to)));

const CHANGES: readonly Change[] = [
  // One bit, one byte, a few bytes.
  (bytes, random) => {
    const out = bytes.slice();
    out[random.nextBelow(out.length)] ^= 1 << random.nextBelow(8);
    return out;
  },
  (bytes, random) => {
    const out = bytes.slice();
    const at = random.nextBelow(out.length);
    for (let i = at; i < Math.min(out.length, at + 1 + random.nextBelow(16)); i++)
      out[i] = random.nextBelow(256);
    return out;
  },
  // Cut off, cut out, doubled.
  (bytes, random) => bytes.slice(0, random.nextBelow(bytes.length + 1)),
  (bytes, random) => {
    const at = random.nextBelow(bytes.length);
    return replaced(bytes, at, at + 1 + random.nextBelow(200), new Uint8Array());
  },
  (bytes, random) => {
    const at = random.nextBelow(bytes.length);
    const piece = bytes.subarray(at, at + 1 + random.nextBelow(400));
    const to = random.nextBelow(bytes.length);
    return replaced(bytes, to, to, piece);
  },
  // A token put in or over what is there; a piece of another file.
  (bytes, random) => {
    const token = TOKENS[random.nextBelow(TOKENS.length)];
    const at = random.nextBelow(bytes.length);
    return replaced(bytes, at, at + random.nextBelow(2) * token.length, token);
  },
  (bytes, random, other) => {
    const from = random.nextBelow(other.length);
    const at = random.nextBelow(bytes.length);
    return replaced(
      bytes,
      at,
      at + random.nextBelow(300),
      other.subarray(from, from + random.nextBelow(300)),
    );
  },
  // A number of eight bytes at a multiple of eight: an edge, the size of the file, or another such number of the file.
  (bytes, random) => {
    const out = bytes.slice();
    const words = out.length >> 3;
    if (words === 0) return out;
    const view = new DataView(out.buffer);
    const pick = random.nextBelow(EDGES.length + 4);
    const value =
      pick < EDGES.length
        ? EDGES[pick]
        : pick === EDGES.length
          ? BigInt(out.length)
          : view.getBigUint64(8 * random.nextBelow(words), true);
    view.setBigUint64(8 * random.nextBelow(words), value, true);
    return out;
  },
];

/** One to four changes of a file, drawn from `random`; `other` lends pieces. An empty file stays empty. */
export function mutate(seed: Uint8Array, other: Uint8Array, random: RandomStream): Uint8Array {
  let bytes = seed;
  const changes = 1 + random.nextBelow(4);
  for (let k = 0; k < changes && bytes.length > 0; k++)
    bytes = CHANGES[random.nextBelow(CHANGES.length)](bytes, random, other);
  return bytes;
}

const RECORD_CHARACTERS = new TextEncoder().encode("0123456789ABCDEFabcdef:Ss\r\n ");

/** One byte of a record file changed: to any other value, or to a character that record files are made of. */
export function flipByte(seed: Uint8Array, random: RandomStream): Uint8Array {
  const out = seed.slice();
  const at = random.nextBelow(out.length);
  const other = RECORD_CHARACTERS[random.nextBelow(RECORD_CHARACTERS.length)];
  out[at] = random.nextBelow(4) === 0 || other === out[at] ? out[at] ^ (1 + random.nextBelow(255)) : other;
  return out;
}

/** A line of a record file left out, doubled or moved. */
export function moveLine(seed: Uint8Array, random: RandomStream): Uint8Array {
  const lines = new TextDecoder("latin1").decode(seed).split("\n");
  const from = random.nextBelow(lines.length);
  const [line] = random.nextBelow(3) === 0 ? [lines[from]] : lines.splice(from, 1);
  if (random.nextBelow(3) > 0) lines.splice(random.nextBelow(lines.length + 1), 0, line);
  return new TextEncoder().encode(lines.join("\n"));
}
