import Papa from "papaparse";
import { readLog } from "@/lib/logs/read-log";
import type { BenchLine } from "./line";
import { writtenLog } from "./written-log";

// `npm run bench -- full` takes 100 MB.
const MEGABYTES = process.argv.includes("full") ? 100 : 30;

/** Written when its line is run: what lies in memory makes the collector's work, which others would pay for. */
function lazily(decimal: "." | ","): () => Buffer {
  let written: Buffer | null = null;
  return () => {
    written ??= Buffer.concat([...writtenLog(1e6 * MEGABYTES, { delimiter: ";", decimal })]);
    return written;
  };
}
const point = lazily(".");
const comma = lazily(",");
const size = `${MEGABYTES} MB, 16 columns`;

/** The same work with papaparse: text to numbers in columns. */
function papaColumns(): Float64Array[] {
  const { data } = Papa.parse<string[]>(point().toString("utf8"), { delimiter: ";", skipEmptyLines: true });
  const width = data[0].length;
  const columns = Array.from({ length: width }, () => new Float64Array(data.length - 1));
  for (let row = 1; row < data.length; row++)
    for (let c = 0; c < width; c++) columns[c][row - 1] = Number(data[row][c]);
  return columns;
}

function touchEveryByte(): number {
  const bytes = point();
  let sum = 0;
  for (let i = 0; i < bytes.length; i++) sum = (sum + bytes[i]) | 0;
  return sum;
}

function agreement(): string {
  const ours = readLog(point());
  const columns = papaColumns();
  const { timeS, channels } = ours;
  if (timeS.length !== columns[0].length) throw new Error("another number of rows");
  const rpm = channels.find(({ channel }) => channel === "engine_speed");
  const lambda = channels.find(({ channel }) => channel === "lambda");
  for (let i = 0; i < timeS.length; i++)
    if (rpm?.values[i] !== columns[2][i] || lambda?.values[i] !== columns[6][i])
      throw new Error(`row ${i} differs`);
  return "equal to the last bit";
}

/** Reading delimited text into columns of numbers. */
export const lines: BenchLine[] = [
  {
    what: `read a log of ${size}`,
    ours: () => readLog(point()),
    reference: { name: "papaparse into columns", work: papaColumns },
    notRun: null,
    budget: 1 / 4,
    agreement,
  },
  {
    what: `read a log of ${size}`,
    ours: () => readLog(point()),
    reference: { name: "touching every byte", work: touchEveryByte },
    notRun: null,
    budget: 4,
  },
  {
    what: `read a log of ${size}, decimal comma`,
    ours: () => readLog(comma()),
    reference: { name: "decimal point", work: () => readLog(point()) },
    notRun: null,
    budget: 1.15,
  },
];
