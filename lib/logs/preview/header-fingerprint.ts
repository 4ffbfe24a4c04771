import { createHash } from "node:crypto";
import { FileRefusedError } from "@/lib/errors";
import type { LogHead } from "@/lib/logs/preview/gather-head";
import { readHead } from "@/lib/logs/preview/read-head";
import { textLayout } from "@/lib/logs/preview/text-layout";
import { sniffLog } from "@/lib/logs/sniff-log";
import type { LogFormat } from "@/lib/logs/types";

/** What stays the same from file to file of one logger. */
export interface LogHeader {
  format: LogFormat;
  /** Null where the format has none. It tells exports with a decimal comma from those with a point, mostly. */
  delimiter: string | null;
  titles: readonly string[];
  /** Unit of each column as the file states it beside the titles; null where it does not. */
  units: readonly (string | null)[];
}

const canonical = (text: string) => text.normalize("NFC").replace(/\s+/g, " ").trim();

/** SHA-256 (64 hex digits) of a header. Blanks and the way in which a character is composed make no difference. */
export function headerFingerprint({ format, delimiter, titles, units }: LogHeader): string {
  const content = [
    format,
    delimiter,
    titles.map(canonical),
    units.map((unit) => (unit ? canonical(unit) : null)),
  ];
  return createHash("sha256").update(JSON.stringify(content)).digest("hex");
}

/**
 * The header of a log as the file alone tells it, without any key: the same for every file of a logger. Null where the file
 * can't be read so far.
 */
export function findHeader(head: LogHead): LogHeader | null {
  try {
    if (sniffLog(head.bytes).kind === "delimited") {
      const { form } = textLayout(head, {}, 1);
      const { delimiter, titles, unitRow } = form;
      return {
        format: "delimited",
        delimiter,
        titles,
        units: titles.map((_, index) => unitRow?.[index] || null),
      };
    }
    const { format, time, channels } = readHead(head, {});
    return {
      format,
      delimiter: null,
      titles: [time.column, ...channels.map((channel) => channel.column)],
      units: [null, ...channels.map((channel) => channel.unitFound)],
    };
  } catch (error) {
    if (error instanceof FileRefusedError) return null;
    throw error;
  }
}

/** Fingerprint of the header of a log; null where it has none that can be read. */
export function fingerprintOfHead(head: LogHead): string | null {
  const header = findHeader(head);
  return header && headerFingerprint(header);
}
