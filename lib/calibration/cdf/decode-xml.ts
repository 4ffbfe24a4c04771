import { FileRefusedError } from "@/lib/errors";
import { isUtf8 } from "@/lib/format/is-utf8";

const PIECE = 1 << 16;
const HEAD = 400;

/** Which encoding an XML file is in, and a note where that is not what it says of itself. */
export interface XmlEncoding {
  label: string;
  note: string | null;
}

/**
 * Encoding of an XML file: its mark, what it declares, else UTF-8; where the bytes are no UTF-8 after all, Windows-1252 with a note.
 * @throws FileRefusedError `encoding_unknown`
 */
export function xmlEncoding(bytes: Uint8Array): XmlEncoding {
  const [a, b] = bytes;
  if ((a === 0xff && b === 0xfe) || (a === 0x3c && b === 0)) return { label: "utf-16le", note: null };
  if ((a === 0xfe && b === 0xff) || (a === 0 && b === 0x3c)) return { label: "utf-16be", note: null };
  const head = new TextDecoder("latin1").decode(bytes.subarray(0, HEAD));
  const declared = /^(?:\u00ef\u00bb\u00bf)?\s*<\?xml[^>]*?\sencoding\s*=\s*["']([\w.:-]+)["']/.exec(
    head,
  )?.[1];
  const label = declared === undefined ? "utf-8" : knownLabel(declared);
  if (label !== "utf-8" || isUtf8(bytes)) return { label, note: null };
  const says = declared === undefined ? "states no encoding" : `says it is ${declared}`;
  return { label: "windows-1252", note: `The file ${says} and is no UTF-8; it was read as Windows-1252.` };
}

function knownLabel(label: string): string {
  try {
    return new TextDecoder(label).encoding;
  } catch {
    throw new FileRefusedError(
      "encoding_unknown",
      `The file says its encoding is "${label.slice(0, 40)}", which is not known. Export it as UTF-8.`,
    );
  }
}

/** The text in pieces, without a byte order mark. @throws FileRefusedError `not_text` where the bytes are not in that encoding */
export function* decodedPieces(bytes: Uint8Array, label: string): Generator<string> {
  const decoder = new TextDecoder(label, { fatal: true });
  try {
    for (let at = 0; at < bytes.length; at += PIECE)
      yield decoder.decode(bytes.subarray(at, at + PIECE), { stream: true });
    yield decoder.decode();
  } catch {
    throw new FileRefusedError(
      "not_text",
      `The file is not in the encoding it states (${label}). Export it again.`,
    );
  }
}
