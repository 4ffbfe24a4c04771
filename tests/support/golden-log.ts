import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { FileRefusedError } from "@/lib/errors";
import { LOG_REFUSALS } from "@/lib/logs/read-log";
import type { LogChannel, LogTable } from "@/lib/logs/types";

/** Bytes of a file of tests/golden/logs, unpacked. */
export function goldenLog(name: string): Uint8Array {
  return new Uint8Array(gunzipSync(readFileSync(new URL(`../golden/logs/${name}.gz`, import.meta.url))));
}

/** The channel of a column, which must be there. */
export function columnOf(table: LogTable, column: string): LogChannel {
  const found = table.channels.find((channel) => channel.column === column);
  if (!found) throw new Error(`no column ${column}`);
  return found;
}

/** Code of the refusal, which must be a listed one; "read" when there was none. Any other error is thrown on. */
export function refusalOf(act: () => unknown): string {
  try {
    act();
  } catch (error) {
    if (!(error instanceof FileRefusedError)) throw error;
    if (!(LOG_REFUSALS as readonly string[]).includes(error.code)) throw new Error(`unlisted: ${error.code}`);
    return error.code;
  }
  return "read";
}

export const codesOf = (table: LogTable): string[] => table.problems.map((problem) => problem.code);
