import { readFileSync } from "node:fs";
import { basename } from "node:path";
import { parseArgs } from "node:util";
import { TwinpassError } from "@/lib/errors";
import { logReport } from "@/lib/logs/log-report";
import { readLog } from "@/lib/logs/read-log";
import type { ChannelKey } from "@/lib/logs/types";

const USAGE = "Usage: npm run -s read-log -- path/to/log [--key key.json] [--drive FWD|RWD|AWD]";

/** Prints what the log reader understood as JSON. Exit status 0: read; 1: refused; 2: wrong call. */
function main(): number {
  let path: string | undefined;
  let keyPath: string | undefined;
  let drive: string | undefined;
  try {
    const { values, positionals } = parseArgs({
      allowPositionals: true,
      options: { key: { type: "string" }, drive: { type: "string" } },
    });
    path = positionals[0];
    keyPath = values.key;
    drive = values.drive;
  } catch (error) {
    console.error(`${(error as Error).message}\n${USAGE}`);
    return 2;
  }
  if (path === undefined || (drive !== undefined && drive !== "FWD" && drive !== "RWD" && drive !== "AWD")) {
    console.error(USAGE);
    return 2;
  }
  let bytes: Uint8Array;
  let key: ChannelKey | undefined;
  try {
    bytes = readFileSync(path);
    key = keyPath === undefined ? undefined : (JSON.parse(readFileSync(keyPath, "utf8")) as ChannelKey);
  } catch (error) {
    console.error(`Can't read the input: ${(error as Error).message}`);
    return 2;
  }
  try {
    const table = readLog(bytes, { key, fileName: basename(path), drive });
    console.log(JSON.stringify(logReport(table), null, 1));
    return 0;
  } catch (error) {
    if (!(error instanceof TwinpassError)) throw error;
    console.error(`${error.code}: ${error.message}`);
    return 1;
  }
}

process.exitCode = main();
