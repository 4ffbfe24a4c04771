/** What the first bytes of a file say it is. */
export type SniffedLog =
  | { kind: "empty" }
  | { kind: "gzip" }
  | { kind: "delimited" }
  | { kind: "mdf" }
  | { kind: "nmea" }
  | { kind: "gpx" }
  | { kind: "unsupported"; name: string };

const HEAD_BYTES = 4096;

/** Recognises a log format by its first bytes, never by the file name. */
export function sniffLog(bytes: Uint8Array): SniffedLog {
  if (bytes.length === 0) return { kind: "empty" };
  if (bytes[0] === 0x1f && bytes[1] === 0x8b) return { kind: "gzip" };
  const head = new TextDecoder("latin1").decode(bytes.subarray(0, HEAD_BYTES));
  if (head.startsWith("MDF     ") || head.startsWith("UnFinMF ")) return { kind: "mdf" };
  if (head.startsWith("PK\u0003\u0004")) return { kind: "unsupported", name: "a spreadsheet or ZIP archive" };
  if (head.startsWith("\u00d0\u00cf\u0011\u00e0"))
    return { kind: "unsupported", name: "an old spreadsheet file" };
  const text = head.replace(/^\u00ef\u00bb\u00bf/, "").trimStart();
  if (/^\$[A-Z]{2}[A-Z0-9]{1,3},[^*\n]*\*[0-9A-F]{2}\s*$/im.test(text)) return { kind: "nmea" };
  if (/^<\?xml|^<!|^<gpx/i.test(text))
    return /<gpx[\s>]/.test(text) ? { kind: "gpx" } : { kind: "unsupported", name: "an XML file" };
  if (/^[[{]\s*["{[\]}]/.test(text)) return { kind: "unsupported", name: "a JSON file" };
  return { kind: "delimited" };
}
