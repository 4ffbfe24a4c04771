import { spawn } from "node:child_process";
import { fileURLToPath } from "node:url";
import type { FuzzedReader } from "@/tests/fuzz/fuzz-case";

/** What came of a series of mutated files. A fault names the file by reader, seed and number: the same three make it again. */
export interface FuzzOutcome {
  inputs: number;
  read: number;
  refused: Record<string, number>;
  faults: string[];
  /** Largest resident size of a child, MiB. */
  peakMb: number;
}

const HOME = fileURLToPath(new URL("../../", import.meta.url));
const CHILD = "tests/fuzz/fuzz-child.ts";
const HEAP_MB = 256;

interface Order {
  reader: FuzzedReader;
  seed: number;
  count: number;
  /** A file that takes longer than this is a hang; the child is killed. */
  limitMs: number;
}

/** Reads files `from` to `count` in one child; resolves with the number of the first file not dealt with. */
function runChild(order: Order, from: number, outcome: FuzzOutcome): Promise<number> {
  const { reader, seed, count, limitMs } = order;
  const args = [
    `--max-old-space-size=${HEAP_MB}`,
    "--import",
    "tsx",
    CHILD,
    reader,
    `${seed}`,
    `${from}`,
    `${count}`,
  ];
  const child = spawn(process.execPath, args, { cwd: HOME, stdio: ["ignore", "pipe", "pipe"] });
  let current = from;
  let running = false;
  let hung = false;
  let errors = "";
  let rest = "";
  const name = () => `${reader} seed ${seed} file ${current}`;
  let timer: NodeJS.Timeout | undefined;
  const watch = () => {
    clearTimeout(timer);
    timer = setTimeout(() => {
      hung = true;
      child.kill("SIGKILL");
    }, limitMs);
  };
  const hear = (line: string) => {
    const [word, ...words] = line.split(" ");
    const said = words.join(" ");
    if (word === "start") {
      current = Number(said);
      running = true;
      watch();
    } else if (word === "end") {
      running = false;
      clearTimeout(timer);
      outcome.inputs++;
      if (said === "read") outcome.read++;
      else if (said.startsWith("fault ")) outcome.faults.push(`${name()}: ${said.slice(6)}`);
      else outcome.refused[said] = (outcome.refused[said] ?? 0) + 1;
    } else if (word === "rss") outcome.peakMb = Math.max(outcome.peakMb, Number(said));
  };
  child.stdout.on("data", (chunk: Buffer) => {
    const lines = (rest + chunk.toString("utf8")).split("\n");
    rest = lines.pop() ?? "";
    for (const line of lines) hear(line);
  });
  child.stderr.on("data", (chunk: Buffer) => {
    errors = (errors + chunk.toString("utf8")).slice(-2000);
  });
  return new Promise((resolve, reject) => {
    child.once("error", reject);
    child.once("close", (code) => {
      clearTimeout(timer);
      if (code === 0) return resolve(count);
      if (!running)
        return reject(new Error(`The fuzzing child ended with code ${code} outside a file: ${errors}`));
      outcome.inputs++;
      outcome.faults.push(
        `${name()}: ${hung ? `took longer than ${limitMs} ms` : `ended the process: ${errors}`}`,
      );
      resolve(current + 1);
    });
  });
}

/** Reads `count` mutated files in children that can be killed; a child that hangs or dies is a fault, and the next goes on after it. */
export async function fuzzReader(order: Order): Promise<FuzzOutcome> {
  const outcome: FuzzOutcome = { inputs: 0, read: 0, refused: {}, faults: [], peakMb: 0 };
  for (let next = 0; next < order.count; ) next = await runChild(order, next, outcome);
  return outcome;
}
