import { Readable } from "node:stream";
import type { StoredBytes } from "@/storage/port";

/** File name for Content-Disposition (RFC 6266): an ASCII fall-back and the full name in RFC 8187 form. */
function contentDisposition(fileName: string): string {
  const plain = fileName.replaceAll(/[^\w.-]/g, "_");
  const encoded = encodeURIComponent(fileName).replaceAll(
    /['()*]/g,
    (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}

/** What names a download, and keeps it out of shared caches and any browser from rendering it. */
const guarded = (type: string, fileName: string) => ({
  "content-type": type,
  "content-disposition": contentDisposition(fileName),
  "cache-control": "private, no-store",
  "x-content-type-options": "nosniff",
  "content-security-policy": "sandbox",
});

function* encoded(pieces: Iterable<string>): Generator<Uint8Array> {
  for (const piece of pieces) yield Buffer.from(piece);
}

/** A text made piece by piece as a download that no browser renders; nobody holds it as a whole. */
export function downloadText(file: { fileName: string; type: string; pieces: Iterable<string> }): Response {
  const body = Readable.toWeb(Readable.from(encoded(file.pieces))) as ReadableStream<Uint8Array>;
  return new Response(body, { headers: guarded(`${file.type}; charset=utf-8`, file.fileName) });
}

/** A table made on the way as a download that no browser renders. */
export function downloadCsv({ fileName, csv }: { fileName: string; csv: string }): Response {
  return new Response(csv, { headers: guarded("text/csv; charset=utf-8", fileName) });
}

/** A stored file as a download that no browser renders, with its fingerprint (RFC 9530) beside it. */
export function download(file: StoredBytes & { fileName: string; sha256: string }): Response {
  const body = Readable.toWeb(file.body) as ReadableStream<Uint8Array>;
  return new Response(body, {
    headers: {
      ...guarded("application/octet-stream", file.fileName),
      "content-length": String(file.sizeBytes),
      "repr-digest": `sha-256=:${Buffer.from(file.sha256, "hex").toString("base64")}:`,
      "x-fingerprint": file.sha256,
    },
  });
}
