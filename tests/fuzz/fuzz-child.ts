import { writeSync } from "node:fs";
import { gzipSync } from "node:zlib";
import { randomStream } from "@/lib/signal/random";
import { judgeOutcome } from "@/tests/fuzz/judge-outcome";
import { mutate } from "@/tests/fuzz/mutate";
import { type FuzzedReader, seedFiles } from "@/tests/fuzz/seed-files";

// Reads mutated files one after the other and says before each which one it is, so that the parent knows where it hung or died.
const [reader, seed, from, count] = process.argv.slice(2);
const files = seedFiles(reader as FuzzedReader);
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
  const random = randomStream(Number(seed), i);
  const file = files[random.nextBelow(files.length)];
  const other = files[random.nextBelow(files.length)];
  const packedFirst = random.nextBelow(2) === 1;
  const packed = (bytes: Uint8Array) => (reader === "gzip" ? new Uint8Array(gzipSync(bytes)) : bytes);
  let outcome: string;
  try {
    outcome = judgeOutcome(
      packedFirst ? mutate(packed(file), other, random) : packed(mutate(file, other, random)),
    );
  } catch (error) {
    outcome = `fault ${error instanceof Error ? `${error.name}: ${error.message} ${error.stack?.split("\n")[1] ?? ""}` : String(error)}`;
  }
  say(`end ${outcome.replaceAll("\n", " ")}`);
}
say(`rss ${Math.round(process.resourceUsage().maxRSS / 1024)}`);
