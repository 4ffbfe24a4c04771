import { hexRecord, sRecord } from "../support/record-files";

/** An image file and, where we do not read what a reference program reads (or the other way round), why that is meant. */
export interface ImageCase {
  name: string;
  kind: "hex" | "s19";
  bytes: Uint8Array;
  meant: string | null;
}

const data = (offset: number, ...bytes: number[]) => hexRecord(0, offset, bytes);
const linear = (high: number) => hexRecord(4, 0, [high >> 8, high & 0xff]);
const segment = (base: number) => hexRecord(2, 0, [base >> 8, base & 0xff]);
const END = ":00000001FF";
const s1 = (address: number, ...bytes: number[]) => sRecord(1, address, bytes);
const S0 = sRecord(0, 0, [72, 105]);
const S9 = sRecord(9, 0, []);

type Odd = [name: string, lines: string[], meant?: string, end?: string];

const HEX: Odd[] = [
  ["Ctrl-Z after the end", [data(0, 1, 2), END, "\u001a"]],
  ["no end record", [data(0x10, 1, 2)], "refused: it may be cut off"],
  ["data after the end", [data(0, 1), END, data(4, 2)], "refused: the image is in doubt"],
  ["wrong checksum", [":0100000001FF", END]],
  ["overlap, same bytes", [data(0, 1, 2, 3), data(1, 2, 3, 4), END], "read with a note: no byte is in doubt"],
  ["overlap, other bytes", [data(0, 1, 2), data(1, 9), END]],
  ["records out of order", [data(0x20, 3), data(0x10, 1, 2), END]],
  [
    "type 02, data across 0xFFFF",
    [segment(0x1000), data(0xffff, 1, 2), END],
    "refused: one program wraps, the other runs on",
  ],
  [
    "no base, data across 0xFFFF",
    [data(0xffff, 1, 2), END],
    "refused: without a linear base it may wrap or run on",
  ],
  ["type 04, data across 0xFFFF", [linear(1), data(0xffff, 1, 2), END]],
  ["addresses from 2 GiB on", [linear(0x8000), data(0, 1), linear(0xffff), data(0xfff0, 2), END]],
  ["sparse from 0 to 4 GiB", [data(0, 1), linear(0xffff), data(0xfff0, 2, 3), END]],
  [
    "the last byte below 4 GiB",
    [linear(0xffff), data(0xffff, 2), END],
    "read: srecord's own addresses end one byte earlier",
  ],
  ["zero-length data", [data(0, 1), data(0x50), END]],
  ["lower-case digits", [data(0, 0xab, 0xcd).toLowerCase(), END.toLowerCase()]],
  ["blank lines", ["", data(0, 0xab), "", END, ""]],
  ["comment before", ["; made by hand", data(0, 1), END], "refused with the line: not part of the format"],
  ["UTF-8 mark", [`\ufeff${data(0, 1, 2)}`, END], "the mark is stripped, no record is dropped"],
  ["CR line ends", [data(0, 1), data(1, 2), END], "read: CR ends a line", "\r"],
  ["CRLF line ends", [data(0, 1), data(1, 2), END], undefined, "\r\n"],
  [
    "both start records",
    [hexRecord(3, 0, [0, 1, 0, 5]), hexRecord(5, 0, [0, 0, 0x23, 5]), data(0, 1), END],
    "read with a note: the start address is no calibration data",
  ],
  ["end record with an address", [data(0, 1), hexRecord(1, 0x1234, [])]],
  ["end record with data", [data(0, 1), hexRecord(1, 0, [9])]],
  ["base record with an offset", [hexRecord(4, 9, [0, 1]), data(0, 1), END]],
  ["two end records", [data(0, 1), END, END], "refused: nothing may follow the end"],
  ["blanks in front", [`  ${data(0, 1)}`, END]],
  ["text behind a record", [`${data(0, 1)} ;x`, END]],
  ["type 06", [hexRecord(6, 0, []), data(0, 1), END]],
  ["cut-off line", [data(0, 1, 2).slice(0, -2), END]],
];

const S_RECORD: Odd[] = [
  ["no header", [s1(0, 1), S9]],
  ["no end record", [S0, s1(0, 1)]],
  ["S5 with a wrong count", [S0, s1(0, 1), sRecord(5, 2, []), S9]],
  ["S5 with bytes behind its count", [S0, s1(0, 1), sRecord(5, 1, [5]), S9]],
  ["end record with data", [S0, s1(0, 1), sRecord(9, 0, [5])], "refused: an end record holds no data"],
  ["record without data", [S0, s1(0, 1), s1(9), S9]],
  ["S5 and S6 with the right count", [S0, s1(0, 1), sRecord(5, 1, []), sRecord(6, 1, []), S9]],
  ["S4", [S0, s1(0, 1), "S4030000FC", S9]],
  ["S1, S2, S3 mixed", [S0, s1(0x10, 1), sRecord(2, 0x100000, [2]), sRecord(3, 0x80000000, [3]), S9]],
  ["end of another width", [S0, sRecord(3, 0x10, [1]), S9]],
  ["data after the end", [S0, s1(0, 1), S9, s1(4, 2)]],
  ["header in the middle", [S0, s1(0, 1), S0, s1(4, 2), S9]],
  ["overlap, same bytes", [S0, s1(0, 1, 2), s1(1, 2), S9]],
  ["overlap, other bytes", [S0, s1(0, 1, 2), s1(1, 9), S9]],
  ["wrong length", [S0, "S1060000010203", S9]],
  ["wrong sum", [S0, "S104000001FF", S9]],
  [
    "lower case",
    [S0.toLowerCase(), s1(0, 0xab).toLowerCase(), S9.toLowerCase()],
    "read: the records are whole",
  ],
  ["no line end at the end", [S0, s1(0, 1), S9], undefined, "\n"],
];

const casesOf = (kind: ImageCase["kind"], odd: Odd[]): ImageCase[] =>
  odd.map(([name, lines, meant = null, end = "\n"]) => ({
    name: `${kind}: ${name}`,
    kind,
    bytes: new TextEncoder().encode(lines.join(end) + (name.startsWith("no line end") ? "" : end)),
    meant,
  }));

/** Each odd case in which programs are known to differ or might. */
export const ODD_IMAGES: readonly ImageCase[] = [...casesOf("hex", HEX), ...casesOf("s19", S_RECORD)];
