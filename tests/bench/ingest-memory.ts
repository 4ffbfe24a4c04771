import { spawnSync } from "node:child_process";
import { closeSync, mkdtempSync, openSync, rmSync, writeSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { writtenLog } from "./written-log";

const MEGABYTES = 100;
const BUDGET_MIB = 64;

/** Peak memory of a child that reads a log of 100 MB from a file, beyond what it needs anyway and the columns it returns. */
export function printMemory(): boolean {
  const folder = mkdtempSync(join(tmpdir(), "ingest-"));
  try {
    const file = join(folder, "log.csv");
    const out = openSync(file, "w");
    for (const block of writtenLog(1e6 * MEGABYTES, { delimiter: ";", decimal: "." })) writeSync(out, block);
    closeSync(out);
    const child = spawnSync(process.execPath, ["--import", "tsx", "tests/bench/ingest-child.ts", file], {
      encoding: "utf8",
    });
    if (child.status !== 0) throw new Error(child.stderr);
    const { rows, columnsMib, beyondMib, ticks } = JSON.parse(child.stdout);
    const inside = beyondMib <= BUDGET_MIB;
    console.log(
      `${beyondMib.toFixed(1).padStart(7)}  ${"MiB beyond the columns".padEnd(40)} read ${MEGABYTES} MB from a file, ${rows} rows, columns ${columnsMib.toFixed(0)} MiB: ${inside ? "inside" : "OUTSIDE"} ${BUDGET_MIB} (timers fired ${ticks} times meanwhile)`,
    );
    return inside;
  } finally {
    rmSync(folder, { recursive: true });
  }
}
