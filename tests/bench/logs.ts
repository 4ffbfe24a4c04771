import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import Papa from "papaparse";
import { readLog } from "@/lib/logs/read-log";
import type { BenchLine } from "./line";

const log = gunzipSync(readFileSync("tests/golden/runs/p1-hatch-a-b/r01.csv.gz"));
const parsePapa = () =>
  Papa.parse<string[]>(log.toString("utf8"), { delimiter: "," }).data.map((row) => row.map(Number));

/** Reading logs. */
export const lines: BenchLine[] = [
  {
    what: "read one log of 5,000 rows",
    ours: () => readLog(log),
    reference: { name: "papaparse with numbers", work: parsePapa },
    notRun: null,
    budget: null,
  },
];
