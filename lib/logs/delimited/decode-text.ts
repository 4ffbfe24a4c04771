import { FileRefusedError } from "@/lib/errors";

/** Text of a log file and the name of the encoding that it was read in. */
export interface DecodedText {
  text: string;
  encoding: string;
}

/** Share of control characters above which a file is not text; tables of numbers hold none. */
const MAX_CONTROL_SHARE = 0.002;
const PROBE_BYTES = 65_536;

function refuseNotText(): never {
  throw new FileRefusedError(
    "not_text",
    "This file is not a text log: it holds bytes that no table of numbers has. Export the log as CSV and try again.",
  );
}

function utf16WithoutMark(bytes: Uint8Array): "utf-16le" | "utf-16be" | null {
  const n = Math.min(bytes.length & ~1, PROBE_BYTES);
  if (n < 8) return null;
  let even = 0;
  let odd = 0;
  for (let i = 0; i < n; i += 2) {
    if (bytes[i] === 0) even++;
    if (bytes[i + 1] === 0) odd++;
  }
  const half = n / 2;
  if (odd > 0.7 * half && even === 0) return "utf-16le";
  if (even > 0.7 * half && odd === 0) return "utf-16be";
  return null;
}

function looksLikeText(bytes: Uint8Array): boolean {
  const n = Math.min(bytes.length, PROBE_BYTES);
  let control = 0;
  for (let i = 0; i < n; i++) {
    const byte = bytes[i] ?? 0;
    if (byte === 0) return false;
    if (byte < 32 && byte !== 9 && byte !== 10 && byte !== 12 && byte !== 13 && byte !== 26) control++;
    else if (byte === 127) control++;
  }
  return control <= MAX_CONTROL_SHARE * n;
}

function decodeAs(bytes: Uint8Array, label: string, fatal: boolean, cut: boolean): string | null {
  try {
    return new TextDecoder(label, { fatal }).decode(bytes, { stream: cut });
  } catch {
    return null;
  }
}

/**
 * Decodes a text log. Order: a stated encoding, byte order mark, UTF-16 without mark, UTF-8 (strict), windows-1252.
 * No statistical guess. `cut`: the bytes are the beginning of a longer text and may end within a character. Throws FileRefusedError `not_text`.
 */
export function decodeText(bytes: Uint8Array, stated?: string, cut = false): DecodedText {
  if (stated) {
    const text = decodeAs(bytes, stated, false, cut);
    if (text === null) {
      throw new FileRefusedError(
        "not_text",
        `The encoding "${stated}" is not known. Use utf-8, utf-16le or windows-1252.`,
      );
    }
    return { text, encoding: stated.toLowerCase() };
  }
  if (bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf) {
    if (!looksLikeText(bytes)) refuseNotText();
    return { text: decodeAs(bytes, "utf-8", false, cut) ?? "", encoding: "utf-8 BOM" };
  }
  if (bytes[0] === 0xff && bytes[1] === 0xfe) {
    return { text: decodeAs(bytes, "utf-16le", true, cut) ?? refuseNotText(), encoding: "utf-16le" };
  }
  if (bytes[0] === 0xfe && bytes[1] === 0xff) {
    return { text: decodeAs(bytes, "utf-16be", true, cut) ?? refuseNotText(), encoding: "utf-16be" };
  }
  const wide = utf16WithoutMark(bytes);
  if (wide) return { text: decodeAs(bytes, wide, true, cut) ?? refuseNotText(), encoding: wide };
  if (!looksLikeText(bytes)) refuseNotText();
  const utf8 = decodeAs(bytes, "utf-8", true, cut);
  if (utf8 !== null) return { text: utf8, encoding: "utf-8" };
  return { text: decodeAs(bytes, "windows-1252", false, cut) ?? refuseNotText(), encoding: "windows-1252" };
}
