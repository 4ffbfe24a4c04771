import { CALIBRATION_READERS } from "@/tests/fuzz/calibration-seeds";
import { type FuzzOutcome, fuzzReader } from "@/tests/fuzz/fuzz-reader";
import { READERS } from "@/tests/fuzz/seed-files";

// npm run soak:logs or soak:calibration [-- minutes [first seed]]: every reader of the set in turn with new seeds until the
// time is up. Ends with 1 at a fault.
const [set, minutes = "5", firstSeed = "1000"] = process.argv.slice(2);
const readers = set === "calibration" ? CALIBRATION_READERS : READERS;
const FILES = 4000;
const LIMIT_MS = 5000;

const endsAt = Date.now() + 60_000 * Number(minutes);
const totals = new Map<string, FuzzOutcome>();
let faults = 0;
for (let seed = Number(firstSeed); Date.now() < endsAt; seed++) {
  for (const reader of readers) {
    if (Date.now() >= endsAt && totals.has(reader)) break;
    const outcome = await fuzzReader({ reader, seed, count: FILES, limitMs: LIMIT_MS });
    for (const fault of outcome.faults) console.log(`soak:${set}: ${fault}`);
    faults += outcome.faults.length;
    const total = totals.get(reader);
    if (!total) totals.set(reader, outcome);
    else {
      total.inputs += outcome.inputs;
      total.read += outcome.read;
      total.peakMb = Math.max(total.peakMb, outcome.peakMb);
    }
  }
}
for (const [reader, { inputs, read, peakMb }] of totals)
  console.log(
    `soak:${set}: ${reader.padEnd(9)} ${inputs} files, ${read} read, ${inputs - read} refused or at fault, at most ${peakMb} MiB`,
  );
console.log(`soak:${set}: ${faults} faults`);
process.exitCode = faults > 0 ? 1 : 0;
