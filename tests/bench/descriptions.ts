import { spawnSync } from "node:child_process";
import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { scanToken } from "@/lib/calibration/a2l/scan-token";
import type { BenchLine } from "./line";
import { writtenDescription } from "./written-description";

const MEGABYTES = 50;
const BUDGET_MIB = 256;
/** "Seconds" for a description of 50 MB, CPU. */
const BUDGET_READ_S = 10;
/** CPU seconds for 50 MB at the budget of 100 MB in one. */
const BUDGET_S = MEGABYTES / 100;

const demo = gunzipSync(readFileSync("tests/golden/descriptions/ASAP2_Demo_V171.a2l.gz"));
const repeated = Buffer.concat(
  Array.from({ length: Math.ceil((MEGABYTES * 1e6) / demo.length) }, () => demo),
);
const written = Buffer.from(writtenDescription(MEGABYTES * 1e6).bytes);

/** All tokens of a text; throws when one is never closed. */
function tokenise(bytes: Uint8Array): number {
  const state = { bytes, at: 0, start: 0, end: 0, escaped: false };
  let tokens = 0;
  for (let kind = scanToken(state); kind !== "nothing"; kind = scanToken(state)) {
    if (typeof kind !== "string") throw new Error("a token is not closed");
    tokens++;
  }
  return tokens;
}

const tokenLine = (what: string, bytes: Uint8Array): BenchLine => ({
  what: `A2L tokenised, ${MEGABYTES} MB ${what}`,
  ours: () => tokenise(bytes),
  reference: null,
  notRun: null,
  budget: (BUDGET_S * bytes.length) / (MEGABYTES * 1e6),
  agreement: () => `${tokenise(bytes)} tokens`,
});

/** Tokenising descriptions: MB per CPU second is 50 by the seconds shown. */
export const lines: BenchLine[] = [
  tokenLine("of the demonstration file over and over", repeated),
  tokenLine("written for the purpose", written),
];

/** CPU seconds and peak memory of a child that reads a description of 50 MB. */
export function printDescriptionMemory(): boolean {
  const child = spawnSync(
    process.execPath,
    ["--import", "tsx", "tests/bench/description-child.ts", `${MEGABYTES}`],
    {
      encoding: "utf8",
    },
  );
  if (child.status !== 0) throw new Error(child.stderr);
  const { characteristics, cpuS, beyondMib } = JSON.parse(child.stdout);
  const inside = beyondMib <= BUDGET_MIB && cpuS <= BUDGET_READ_S;
  console.log(
    `${beyondMib.toFixed(1).padStart(7)}  ${"MiB beyond the bytes".padEnd(40)} read a description of ${MEGABYTES} MB, ${characteristics} characteristics, ${cpuS.toFixed(1)} CPU s: ${inside ? "inside" : "OUTSIDE"} ${BUDGET_MIB} and ${BUDGET_READ_S} CPU s`,
  );
  return inside;
}
