import fc from "fast-check";
import Papa from "papaparse";

/** A channel of a run to be written: SI values and the ways in which loggers call it and its unit. */
export interface WrittenChannel {
  channel: string;
  titles: readonly string[];
  /** Written unit, how many of it one canonical unit is, what is added, decimal places. */
  units: readonly (readonly [unit: string, factor: number, offset: number, places: number])[];
  values: readonly number[];
}

const TIMES = ["s", "ms", "clock", "iso", "epoch_ms", "epoch_us", "day first"] as const;
const START_MS = Date.UTC(2030, 11, 31, 23, 59, 55, 250);

function timeText(form: (typeof TIMES)[number], timeMs: number, decimal: string): string {
  const at = new Date(START_MS + timeMs);
  switch (form) {
    case "s":
      return (timeMs / 1000).toFixed(3).replace(".", decimal);
    case "ms":
      return String(timeMs);
    case "clock":
      return at.toISOString().slice(11, 23).replace(".", decimal);
    case "iso":
      return at.toISOString();
    case "epoch_ms":
      return String(at.getTime());
    case "epoch_us":
      return `${at.getTime()}000`;
    case "day first": {
      const [day, clock] = at.toISOString().slice(0, 23).split("T");
      return `${day.split("-").reverse().join(".")} ${clock}`;
    }
  }
}
const TIME_UNITS: Partial<Record<(typeof TIMES)[number], string>> = { s: "s", ms: "ms" };

const ENCODINGS: Record<string, (text: string) => Buffer> = {
  "utf-8": (text) => Buffer.from(text),
  "utf-8 with mark": (text) => Buffer.from(`\ufeff${text}`),
  "utf-16le with mark": (text) => Buffer.from(`\ufeff${text}`, "utf16le"),
  "utf-16le without mark": (text) => Buffer.from(text, "utf16le"),
  "utf-16be with mark": (text) => Buffer.from(`\ufeff${text}`, "utf16le").swap16(),
  "windows-1252": (text) => Buffer.from(text, "latin1"),
};

/** Ways of writing a log of `channels` channels. */
export const dialects = (channels: number) =>
  fc.record({
    delimiter: fc.constantFrom(",", ";", "\t", "|"),
    decimal: fc.constantFrom(".", ","),
    encoding: fc.constantFrom(...Object.keys(ENCODINGS)),
    newline: fc.constantFrom("\n", "\r\n", "\r"),
    time: fc.constantFrom(...TIMES),
    picks: fc.array(fc.nat(11), { minLength: 2 * channels, maxLength: 2 * channels }),
    order: fc.shuffledSubarray(
      Array.from({ length: channels + 1 }, (_, k) => k),
      { minLength: channels + 1 },
    ),
    unitsIn: fc.constantFrom("square brackets", "round brackets", "row", "bracketed row"),
    quotes: fc.boolean(),
    blankAfter: fc.boolean(),
    statesDelimiter: fc.boolean(),
    preamble: fc.subarray(["# recorded on the road", "driver: x, car: y; day 3", ""]),
    noise: fc.subarray([
      "trailing delimiter",
      "header again",
      "blank lines",
      "row twice",
      "cut off",
      "missing marks",
    ]),
  });
export type Dialect = ReturnType<typeof dialects> extends fc.Arbitrary<infer T> ? T : never;

/** What was written, for the comparison: written unit's step in canonical units by channel. */
export interface WrittenLog {
  bytes: Buffer;
  stepOf: Map<string, number>;
}

/** Writes channels over times in one dialect. */
export function writeDialect(
  timesMs: readonly number[],
  channels: readonly WrittenChannel[],
  d: Dialect,
): WrittenLog {
  const stepOf = new Map<string, number>();
  const columns = channels.map(({ channel, titles, units, values }, k) => {
    const [unit, factor, offset, places] = units[d.picks[2 * k] % units.length];
    stepOf.set(channel, 10 ** -places / factor);
    const cells = values.map((v) => (v * factor + offset).toFixed(places).replace(".", d.decimal));
    return { title: titles[d.picks[2 * k + 1] % titles.length], unit, cells };
  });
  const times = timesMs.map((t) => timeText(d.time, t, d.decimal));
  const all = [{ title: "Time", unit: TIME_UNITS[d.time] ?? "", cells: times }, ...columns];
  const placed = d.order.map((k) => all[k]);
  const inRow = d.unitsIn === "row" || d.unitsIn === "bracketed row";
  const [open, close] = d.unitsIn === "round brackets" ? "()" : "[]";
  const head = placed.map(({ title, unit }) =>
    inRow || unit === "" ? title : `${title} ${open}${unit}${close}`,
  );
  const unitRow = placed.map(({ unit }) => (d.unitsIn === "bracketed row" && unit ? `[${unit}]` : unit));
  const rows = timesMs.map((_, i) => placed.map(({ cells }) => cells[i]));
  const has = (noise: Dialect["noise"][number]) => d.noise.includes(noise);
  const options = { delimiter: d.delimiter, quotes: d.quotes || d.delimiter === d.decimal, newline: "\n" };
  const line = (cells: readonly string[]) => Papa.unparse([[...cells]], options);
  const speed = placed.findIndex(({ title }) => title !== "Time");
  if (has("missing marks")) for (let i = 40; i < 44; i++) rows[i][speed] = ["", "NaN", "--", "n/a"][i - 40];
  const data = rows.map((cells) => {
    const text = line(cells) + (has("trailing delimiter") ? d.delimiter : "");
    return d.blankAfter && !options.quotes ? text.replaceAll(d.delimiter, `${d.delimiter} `) : text;
  });
  if (has("header again")) data.splice(60, 0, line(head));
  if (has("blank lines")) data.splice(30, 0, "", "");
  if (has("row twice")) data.splice(20, 0, data[20]);
  if (has("cut off")) data.push(data[data.length - 1].slice(0, 9));
  const top = d.statesDelimiter && d.delimiter !== "\t" ? [`sep=${d.delimiter}`] : d.preamble;
  const text = [...top, line(head), ...(inRow ? [line(unitRow)] : []), ...data].join(d.newline);
  return { bytes: ENCODINGS[d.encoding](text), stepOf };
}
