import { gunzipSync } from "node:zlib";
import { FileRefusedError } from "@/lib/errors";
import { LOG_REFUSALS, readLog } from "@/lib/logs/read-log";
import type { LogTable } from "@/lib/logs/types";

/** What may happen to rows of a text file without being listed one by one; each is told as a problem entry. */
const EXPLAINED = new Set([
  "repeated_header",
  "repeated_time",
  "time_jumps_back",
  "rows_refused",
  "preamble",
]);

function rises(timeS: Float64Array): boolean {
  return timeS.every((t, i) => Number.isFinite(t) && (i === 0 || t > timeS[i - 1]));
}

/** Lines of a delimited text that are neither read nor refused nor explained; 0 where quotes make lines uncertain. */
function lostLines(table: LogTable, bytes: Uint8Array): number {
  if (table.format !== "delimited" || table.problems.some(({ code }) => EXPLAINED.has(code))) return 0;
  const plain = bytes[0] === 0x1f && bytes[1] === 0x8b ? gunzipSync(bytes) : bytes;
  const content = new TextDecoder(table.encoding?.split(" ")[0] ?? "utf-8").decode(plain);
  if (content.includes('"')) return 0;
  const lines = content.split(/\r\n|\n|\r/).filter((line) => line.replace(/[\s,;|]/g, "") !== "").length;
  // A sep= line, a header and a unit row are no data.
  return Math.max(0, lines - table.rowsRead - table.rowsRefused.length - 3);
}

/** What is wrong with a table that a reader returned; null when its counts add up. */
function faultOf(table: LogTable, bytes: Uint8Array): string | null {
  const { timeS, channels } = table;
  if (!rises(timeS)) return "time does not rise";
  if (table.rowsRead !== timeS.length) return `${table.rowsRead} rows told, ${timeS.length} there`;
  if (timeS.length < 3) return "too few rows";
  for (const channel of channels) {
    const own = channel.timeS ?? timeS;
    if (channel.values.length !== own.length) return `"${channel.column}" has another length than its times`;
    if (channel.timeS && !rises(channel.timeS)) return `times of "${channel.column}" do not rise`;
  }
  const lost = lostLines(table, bytes);
  return lost > 0 ? `${lost} lines lost without a word` : null;
}

/** Reads bytes as a log. `read` or the code of the refusal; a fault of the reader is thrown. */
export function judgeOutcome(bytes: Uint8Array): string {
  let table: LogTable;
  try {
    table = readLog(bytes);
  } catch (error) {
    if (!(error instanceof FileRefusedError)) throw error;
    if (!(LOG_REFUSALS as readonly string[]).includes(error.code))
      throw new Error(`refused with unlisted code ${error.code}`);
    if (error.message.length > 2000) throw new Error(`refused in ${error.message.length} characters`);
    return error.code;
  }
  const fault = faultOf(table, bytes);
  if (fault) throw new Error(fault);
  return "read";
}
