import { readLog } from "@/lib/logs/read-log";
import { type WrittenChannel, writeMdf } from "@/tests/support/mdf-writer";
import type { BenchLine } from "./line";

const ROWS = 400_000;

const time: WrittenChannel = {
  name: "t",
  unit: "s",
  type: 2,
  sync: 1,
  dataType: 4,
  byteOffset: 0,
  bitCount: 64,
};
const linear = { type: 1, values: [0, 0.01] };

/** A record of a usual logger: time, a road speed, and channels of several widths. */
function file(form: "plain" | "transposed", channels: WrittenChannel[], dataBytes: number): Uint8Array {
  const stream = new Uint8Array(ROWS * dataBytes);
  const view = new DataView(stream.buffer);
  for (let i = 0; i < ROWS; i++) {
    view.setFloat64(i * dataBytes, i / 1000, true);
    for (let k = 8; k + 2 <= dataBytes; k += 2)
      view.setUint16(i * dataBytes + k, (i * (k + 1)) & 0x3fff, true);
  }
  return writeMdf([
    {
      groups: [{ channels: [time, ...channels], dataBytes, cycles: ROWS }],
      stream,
      form,
      blockBytes: dataBytes * 2000,
    },
  ]);
}

const wide = Array.from(
  { length: 12 },
  (_, k): WrittenChannel => ({
    name: k === 0 ? "GPS speed" : `float ${k}`,
    unit: k === 0 ? "m/s" : undefined,
    dataType: 4,
    byteOffset: 8 + 8 * k,
    bitCount: 64,
  }),
);
const narrow = Array.from(
  { length: 20 },
  (_, k): WrittenChannel => ({
    name: k === 0 ? "GPS speed" : `word ${k}`,
    unit: k === 0 ? "km/h" : undefined,
    dataType: 0,
    byteOffset: 8 + 2 * k,
    bitCount: 16,
    conversion: linear,
  }),
);
/** Reading MDF 4: 100 MB of records a second of CPU when they are not packed. */
const line = (
  what: string,
  form: "plain" | "transposed",
  channels: WrittenChannel[],
  dataBytes: number,
): BenchLine => {
  const bytes = file(form, channels, dataBytes);
  const megabytes = (ROWS * dataBytes) / 1e6;
  return {
    what: `read MDF 4, ${what}, ${megabytes.toFixed(1)} MB of records (${(megabytes / 100).toFixed(3)} s are 100 MB/s)`,
    ours: () => readLog(bytes),
    reference: null,
    notRun: null,
    budget: form === "plain" ? Math.round(10 * megabytes) / 1000 : null,
    agreement: () => {
      const { rowsRead, time, channels: read } = readLog(bytes);
      if (rowsRead !== ROWS || read.length !== channels.length || time.rateHz !== 1000)
        throw new Error("read otherwise");
      return "every record read";
    },
  };
};

export const lines: BenchLine[] = [
  line("12 doubles", "plain", wide, 104),
  line("20 words with a linear conversion", "plain", narrow, 48),
  line("20 words, transposed and packed", "transposed", narrow, 48),
];
