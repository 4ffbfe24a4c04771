import { FileRefusedError } from "@/lib/errors";

const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;
const CTRL_Z = 26;

const NIBBLE = new Int8Array(256).fill(-1);
for (let i = 0; i < 16; i++) {
  NIBBLE[i.toString(16).charCodeAt(0)] = i;
  NIBBLE[i.toString(16).toUpperCase().charCodeAt(0)] = i;
}

/** A record line: its number (from 1) and the byte range of its text, blanks at the end left out. */
export interface RecordLine {
  line: number;
  from: number;
  to: number;
}

/**
 * Walks over the lines of a record file: LF, CRLF or CR, UTF-8 mark stripped, blank lines skipped, DOS end marks (0x1A) at the
 * end of a line left out. Lines are handed over in one reused object.
 */
export function forEachRecordLine(bytes: Uint8Array, onLine: (line: RecordLine) => void): void {
  let at = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0;
  const current: RecordLine = { line: 0, from: 0, to: 0 };
  while (at < bytes.length) {
    const end = lineEnd(bytes, at);
    const to = trimmedEnd(bytes, at, end);
    current.line++;
    current.from = at;
    current.to = to;
    const isEmpty = to === at;
    at = end + (bytes[end] === CARRIAGE_RETURN && bytes[end + 1] === LINE_FEED ? 2 : 1);
    if (!isEmpty) onLine(current);
  }
}

function lineEnd(bytes: Uint8Array, from: number): number {
  let at = from;
  while (at < bytes.length && bytes[at] !== LINE_FEED && bytes[at] !== CARRIAGE_RETURN) at++;
  return at;
}

function trimmedEnd(bytes: Uint8Array, from: number, end: number): number {
  let to = end;
  while (to > from && (bytes[to - 1] === 32 || bytes[to - 1] === 9 || bytes[to - 1] === CTRL_Z)) to--;
  return to;
}

/** Refuses a file at a line. */
export function refuseLine(code: string, line: number, reason: string): never {
  throw new FileRefusedError(code, `Line ${line}: ${reason}`, { line });
}

/** The byte written as two hexadecimal digits at `at`; refuses the line when they are none. */
export function hexByte(bytes: Uint8Array, at: number, line: number): number {
  const value = (NIBBLE[bytes[at]] << 4) | NIBBLE[bytes[at + 1]];
  if (value < 0 || at + 1 >= bytes.length) refuseDigit(line);
  return value;
}

/**
 * Writes the bytes given as pairs of hexadecimal digits from `at` on into `into`, `count` of them, and returns their sum.
 * Refuses the line when a character is no digit. The pairs must lie inside `bytes`.
 */
export function hexRun(
  bytes: Uint8Array,
  at: number,
  line: number,
  into: Uint8Array,
  offset: number,
  count: number,
): number {
  const sum = decodePairs(bytes, at, into, offset, count);
  if (sum < 0) refuseDigit(line);
  return sum;
}

/** The hot loop alone: what stands behind such a loop would be compiled without ever having run. Negative for a bad digit. */
function decodePairs(bytes: Uint8Array, at: number, into: Uint8Array, offset: number, count: number): number {
  let sum = 0;
  let any = 0;
  for (let i = 0; i < count; i++) {
    const value = (NIBBLE[bytes[at + 2 * i]] << 4) | NIBBLE[bytes[at + 2 * i + 1]];
    any |= value;
    sum += value;
    into[offset + i] = value;
  }
  return any < 0 ? -1 : sum;
}

function refuseDigit(line: number): never {
  refuseLine("line_not_a_record", line, "a character is no hexadecimal digit. Export the image again.");
}
