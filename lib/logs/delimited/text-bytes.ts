import { decodeText } from "@/lib/logs/delimited/decode-text";

/** A text log as bytes in which every mark that cuts lines and cells is one ASCII byte, whatever its encoding was. */
export interface TextBytes {
  encoding: string;
  /** The beginning of the file as text, up to its last whole line unless the file ends there. */
  head: string;
  /** The next bytes of the file, in an ASCII-compatible encoding. */
  convert: (bytes: Uint8Array) => Uint8Array;
  /** What was held back of a character cut in two. */
  finish: () => Uint8Array;
  /** A cell of the converted bytes as text. */
  decode: (bytes: Uint8Array) => string;
}

const ASCII_COMPATIBLE = new Set([
  "utf-8",
  "utf-8 BOM",
  "windows-1252",
  "iso-8859-1",
  "latin1",
  "us-ascii",
  "ascii",
]);
const BOM = [0xef, 0xbb, 0xbf];

/**
 * Settles the encoding from the beginning of a file; UTF-16 and the like are turned into UTF-8 on the way. A file that shows
 * its first byte beyond UTF-8 only later is read as windows-1252 from there on: numbers are the same in both.
 * @param complete whether `head` is the whole file
 * @throws FileRefusedError `not_text`
 */
export function openText(head: Uint8Array, complete: boolean, stated?: string): TextBytes {
  const { text, encoding } = decodeText(head, stated, !complete);
  const lineEnd = text.includes("\n") ? "\n" : "\r";
  const whole = complete ? text.length : text.lastIndexOf(lineEnd) + 1;
  const common = { encoding, head: text.slice(0, whole || text.length) };
  if (ASCII_COMPATIBLE.has(encoding)) {
    const bomLength = BOM.every((byte, k) => head[k] === byte) ? BOM.length : 0;
    let first = true;
    const convert = (bytes: Uint8Array) => {
      const from = first ? bomLength : 0;
      first = false;
      return from > 0 ? bytes.subarray(from) : bytes;
    };
    return { ...common, convert, finish: () => new Uint8Array(), decode: cellDecoder(encoding) };
  }
  const decoder = new TextDecoder(encoding);
  const encoder = new TextEncoder();
  return {
    ...common,
    convert: (bytes) => encoder.encode(decoder.decode(bytes, { stream: true })),
    finish: () => encoder.encode(decoder.decode()),
    decode: cellDecoder("utf-8"),
  };
}

function cellDecoder(encoding: string): (bytes: Uint8Array) => string {
  const western = new TextDecoder("windows-1252");
  const strict = encoding.startsWith("utf-8") ? new TextDecoder("utf-8", { fatal: true }) : null;
  return (bytes) => {
    if (strict === null) return western.decode(bytes);
    try {
      return strict.decode(bytes);
    } catch {
      return western.decode(bytes);
    }
  };
}
