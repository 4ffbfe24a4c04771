import { writeSync } from "node:fs";
import { randomStream } from "@/lib/signal/random";
import { fuzzCase } from "@/tests/fuzz/fuzz-case";
import { peakMemoryBytes } from "@/tests/support/peak-memory";

// Reads mutated files one after the other and says before each which one it is, so that the parent knows where it hung or died.
const [reader, seed, from, count] = process.argv.slice(2);
const judge = fuzzCase(reader);
const pause = new Int32Array(new SharedArrayBuffer(4));

/** Writes a line before anything else happens; a parent that is behind with reading is waited for. */
function say(line: string): void {
  for (;;) {
    try {
      writeSync(1, `${line}\n`);
      return;
    } catch (error) {
      if ((error as NodeJS.ErrnoException).code !== "EAGAIN") throw error;
      Atomics.wait(pause, 0, 0, 5);
    }
  }
}

for (let i = Number(from); i < Number(count); i++) {
  say(`start ${i}`);
  let outcome: string;
  try {
    outcome = judge(randomStream(Number(seed), i));
  } catch (error) {
    outcome = `fault ${error instanceof Error ? `${error.name}: ${error.message} ${error.stack?.split("\n")[1] ?? ""}` : String(error)}`;
  }
  say(`end ${outcome.replaceAll("\n", " ")}`);
}
say(`rss ${Math.round(peakMemoryBytes() / (1024 * 1024))}`);
