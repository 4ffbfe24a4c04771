import { createReadStream, statSync } from "node:fs";
import { readLogStream } from "@/lib/logs/read-log-stream";
import { peakMemoryBytes } from "@/tests/support/peak-memory";
import { writtenLog } from "./written-log";

// Reads the file named and prints how far its memory grew beyond what a small log of the same kind takes.
const MIB = 1024 * 1024;
const file = process.argv[2];
const small = Buffer.concat([...writtenLog(3e6, { delimiter: ";", decimal: "." })]);

async function* inPieces(bytes: Uint8Array) {
  for (let at = 0; at < bytes.length; at += 65_536) yield bytes.subarray(at, at + 65_536);
}

await readLogStream(inPieces(small), small.length);
const before = process.memoryUsage.rss();
let ticks = 0;
const timer = setInterval(() => ticks++, 1);
const table = await readLogStream(createReadStream(file), statSync(file).size);
clearInterval(timer);
const peak = peakMemoryBytes();
const columnsMib = (8 * table.rowsRead * (table.channels.length + 1)) / MIB;
console.log(
  JSON.stringify({ rows: table.rowsRead, columnsMib, beyondMib: (peak - before) / MIB - columnsMib, ticks }),
);
