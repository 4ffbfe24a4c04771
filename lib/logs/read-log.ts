import { gunzipSync } from "node:zlib";
import { FileRefusedError } from "@/lib/errors";
import { HEAD_BYTES, openDelimited } from "@/lib/logs/delimited/read-delimited";
import { readGpx } from "@/lib/logs/gpx/read-gpx";
import { readMdf } from "@/lib/logs/mdf/read-mdf";
import { readNmea } from "@/lib/logs/nmea/read-nmea";
import { sniffLog } from "@/lib/logs/sniff-log";
import type { ChannelKey, LogTable } from "@/lib/logs/types";

/** Reasons for which a log is refused as unreadable; the first nine are shared with the analysis. */
export const LOG_REFUSALS = [
  "empty_file",
  "no_data_rows",
  "no_time_column",
  "time_not_increasing",
  "non_numeric_values",
  "not_text",
  "too_many_missing",
  "too_few_samples",
  "format_not_supported",
  "ambiguous_decimal",
  "too_many_columns",
  "line_too_long",
  "too_many_values",
  "inflates_too_large",
  "gzip_damaged",
  "file_damaged",
] as const;

/** A packed log may grow to this size; more is refused before it is held in memory. */
export const MAX_INFLATED_BYTES = 256 * 1024 * 1024;

export interface ReadLogOptions {
  /** Saved mapping of columns; wins over what the file says. */
  key?: ChannelKey;
  /** Name of the file, used in messages only. */
  fileName?: string;
  /** Driven axle: tells front and rear wheel speeds apart. Without it they stay free channels, with a problem entry. */
  drive?: "FWD" | "RWD" | "AWD";
  /** Refused rows that are listed; 1,000 when absent. */
  maxRefusedRows?: number;
  /** Size that a packed log may grow to; 256 MiB when absent. */
  maxInflatedBytes?: number;
  /** Values that an MDF file may hold; 64 Mi when absent. */
  maxValues?: number;
}

/** @param limit bytes it grew beyond; null: it can't be unpacked at all */
export function gzipRefusal(limit: number | null): FileRefusedError {
  if (limit === null)
    return new FileRefusedError(
      "gzip_damaged",
      "The packed log can't be unpacked: the file is damaged or cut off. Upload it again.",
    );
  return new FileRefusedError(
    "inflates_too_large",
    `The packed log grows beyond ${Math.floor(limit / 1024 / 1024)} MB. Split the recording and upload the parts.`,
  );
}

/** @param what e.g. "a spreadsheet or ZIP archive" */
export function formatRefusal(what: string, fileName?: string): FileRefusedError {
  return new FileRefusedError(
    "format_not_supported",
    `${fileName ? `"${fileName}"` : "This file"} is ${what}, which is not read yet. Export the log as CSV.`,
  );
}

function inflate(bytes: Uint8Array, limit: number): Uint8Array {
  try {
    return gunzipSync(bytes, { maxOutputLength: limit });
  } catch (error) {
    throw gzipRefusal(error instanceof RangeError ? limit : null);
  }
}

/**
 * Reads a log file into channels in canonical units over strictly rising time. Accepts delimited text in any of its
 * usual dialects, MDF 4, NMEA 0183 and GPX, plain or gzip-packed. Nothing is interpolated; missing is NaN; doubt is a
 * problem entry or a refusal. Throws FileRefusedError with a code of LOG_REFUSALS.
 */
export function readLog(bytes: Uint8Array, options: ReadLogOptions = {}): LogTable {
  const maxInflatedBytes = options.maxInflatedBytes ?? MAX_INFLATED_BYTES;
  let content = bytes;
  let sniffed = sniffLog(content);
  if (sniffed.kind === "gzip") {
    content = inflate(bytes, maxInflatedBytes);
    sniffed = sniffLog(content);
  }
  if (sniffed.kind === "empty")
    throw new FileRefusedError("empty_file", "The file is empty. Export the log again.");
  if (sniffed.kind === "gzip") throw formatRefusal("a file packed twice", options.fileName);
  if (sniffed.kind === "unsupported") throw formatRefusal(sniffed.name, options.fileName);
  if (sniffed.kind === "mdf") return readMdf(content, { ...options, maxInflatedBytes });
  if (sniffed.kind === "nmea") return readNmea(content, options.key ?? {}, options.maxRefusedRows);
  if (sniffed.kind === "gpx") return readGpx(content, options.key ?? {}, options.maxRefusedRows);
  const head = content.subarray(0, HEAD_BYTES);
  const reader = openDelimited(
    head,
    content.length,
    options.key ?? {},
    options.drive,
    options.maxRefusedRows,
  );
  reader.push(content);
  return reader.finish();
}
