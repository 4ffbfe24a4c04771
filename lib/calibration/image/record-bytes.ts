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
 * Walks over the lines of a record file: LF, CRLF or CR, UTF-8 mark stripped, blank lines skipped, a DOS end mark (0x1A)
 * taken as the end of the text. Lines are handed over in one reused object.
 */
export function forEachRecordLine(bytes: Uint8Array, onLine: (line: RecordLine) => void): void {
  let at = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0;
  const current: RecordLine = { line: 0, from: 0, to: 0 };
  while (at < bytes.length) {
    const from = at;
    while (at < bytes.length && bytes[at] !== LINE_FEED && bytes[at] !== CARRIAGE_RETURN) at++;
    let to = at;
    if (at < bytes.length) at += bytes[at] === CARRIAGE_RETURN && bytes[at + 1] === LINE_FEED ? 2 : 1;
    current.line++;
    while (to > from && (bytes[to - 1] === 32 || bytes[to - 1] === 9 || bytes[to - 1] === CTRL_Z)) to--;
    if (to === from) continue;
    current.from = from;
    current.to = to;
    onLine(current);
  }
}

/** Refuses a file at a line. */
export function refuseLine(code: string, line: number, reason: string): never {
  throw new FileRefusedError(code, `Line ${line}: ${reason}`, { line });
}

/** The byte written as two hexadecimal digits at `at`; refuses the line when they are none. */
export function hexByte(bytes: Uint8Array, at: number, line: number): number {
  const value = (NIBBLE[bytes[at]] << 4) | NIBBLE[bytes[at + 1]];
  if (value < 0 || at + 1 >= bytes.length)
    refuseLine("line_not_a_record", line, "a character is no hexadecimal digit. Export the image again.");
  return value;
}
