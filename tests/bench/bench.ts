import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import Papa from "papaparse";
import { changedRanges } from "@/lib/calibration/changed-ranges";
import { parseCampaignFile } from "@/lib/campaign/campaign-schema";
import { readLog } from "@/lib/logs/read-log";
import { analyseCampaign } from "@/lib/measure/analyse-campaign";

// npm run bench: ratios taken in one run on one machine, CPU time, the middle of several rounds. No test depends on them.
const ROUNDS = 7;

/** CPU milliseconds of one call, the middle of several after a first one that warms up. */
function cpuMs(work: () => unknown): number {
  work();
  const times = Array.from({ length: ROUNDS }, () => {
    const before = process.cpuUsage();
    work();
    const spent = process.cpuUsage(before);
    return (spent.user + spent.system) / 1000;
  });
  return times.sort((a, b) => a - b)[Math.floor(ROUNDS / 2)];
}

function report(what: string, ms: number, against: string, referenceMs: number): void {
  const ratio = (ms / referenceMs).toFixed(2).padStart(6);
  console.log(
    `${ratio} x ${against.padEnd(44)} ${what} (${ms.toFixed(1)} ms against ${referenceMs.toFixed(1)} ms)`,
  );
}

const FOLDER = "tests/golden/runs/p1-hatch-a-b";
const golden = (name: string) => gunzipSync(readFileSync(`${FOLDER}/${name}.gz`));

const log = golden("r01.csv");
const parsePapa = () =>
  Papa.parse<string[]>(log.toString("utf8"), { delimiter: "," }).data.map((row) => row.map(Number));
report(
  "read one log of 5,000 rows",
  cpuMs(() => readLog(log)),
  "papaparse with numbers",
  cpuMs(parsePapa),
);

const campaign = parseCampaignFile(readFileSync(`${FOLDER}/campaign-known.json`, "utf8")).campaign;
const bytes = campaign.runs.map((run) => [run.id, golden(run.file.replace(/\.gz$/, ""))] as const);
const readAll = () => new Map(bytes.map(([id, content]) => [id, readLog(content)]));
const logs = readAll();
report(
  "analyse a campaign of 12 runs",
  cpuMs(() => analyseCampaign(campaign, logs)),
  "reading its logs",
  cpuMs(readAll),
);

const SIZE = 8 * 1024 * 1024;
const before = Buffer.alloc(SIZE, 0x5a);
const after = Buffer.from(before);
const copy = Buffer.from(before);
for (let area = 0; area < 60; area += 1) after.fill(0xa5, area * 131_072, area * 131_072 + 32);
const image = (content: Buffer) => ({ segments: [{ address: 0x800000, bytes: content }] });
report(
  "find 60 changed areas in 8 MiB",
  cpuMs(() => changedRanges(image(before), image(after))),
  "one byte compare of equal buffers",
  cpuMs(() => Buffer.compare(before, copy)),
);
