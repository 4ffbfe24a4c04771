import type { DescriptionFile } from "@/lib/calibration/a2l/types";
import { FileRefusedError } from "@/lib/errors";
import { isUtf8 } from "@/lib/format/is-utf8";

/** The bytes of a description with a known encoding, ready for the tokenizer. */
export interface DescriptionText {
  name: string;
  /** Every structural character is one ASCII byte; what lies above belongs to names and texts. */
  bytes: Uint8Array;
  /** Place of the first byte behind a byte order mark. */
  start: number;
  decoder: TextDecoder;
  /** How the file was read, e.g. "utf-8", for people. */
  encoding: string;
}

const HEAD_BYTES = 4096;

const hasMark = (bytes: Uint8Array, ...mark: number[]) => mark.every((byte, i) => bytes[i] === byte);

/**
 * Settles the encoding of a description: byte order mark (UTF-8, UTF-16), else UTF-8 where it is sound, else
 * windows-1252. UTF-16 is rewritten as UTF-8. Throws FileRefusedError `empty_file` or `not_text`.
 */
export function decodeDescription({ name, bytes }: DescriptionFile): DescriptionText {
  if (bytes.length === 0) throw new FileRefusedError("empty_file", `${name} is empty.`);
  const wide = hasMark(bytes, 0xff, 0xfe) ? "utf-16le" : hasMark(bytes, 0xfe, 0xff) ? "utf-16be" : null;
  if (wide) {
    const rewritten = new TextEncoder().encode(new TextDecoder(wide).decode(bytes));
    return { name, bytes: rewritten, start: 0, decoder: new TextDecoder("utf-8"), encoding: wide };
  }
  if (bytes.subarray(0, HEAD_BYTES).includes(0)) {
    throw new FileRefusedError(
      "not_text",
      `${name} is no text: it holds zero bytes. Choose the description (A2L), not the image.`,
    );
  }
  if (hasMark(bytes, 0xef, 0xbb, 0xbf))
    return { name, bytes, start: 3, decoder: new TextDecoder("utf-8"), encoding: "utf-8" };
  const encoding = isUtf8(bytes) ? "utf-8" : "windows-1252";
  return { name, bytes, start: 0, decoder: new TextDecoder(encoding), encoding };
}
