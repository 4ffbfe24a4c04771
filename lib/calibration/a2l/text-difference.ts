import { diffArrays } from "diff";
import { decodeDescription } from "@/lib/calibration/a2l/decode-description";
import type { DescriptionFile } from "@/lib/calibration/a2l/types";
import type { TextDifference } from "@/lib/calibration/changes/types";

type Hunk = NonNullable<TextDifference["hunks"]>[number];

const CONTEXT_LINES = 3;
const MOST_LISTED = 2000;
const LONGEST_LINE = 500;
/** Texts beyond this are not compared, nor is one looked for with more edits: together they bound time and memory. */
const MOST_BYTES = 128 * 1024 * 1024;
const MOST_EDITS = 2000;
const MOST_STEPS = 2e9;

/** Lines of all files; where there are several, each begins with a line of its name. */
function linesOf(files: readonly DescriptionFile[]): string[] {
  return files.flatMap((file) => {
    const { bytes, start, decoder } = decodeDescription(file);
    const lines = decoder.decode(bytes.subarray(start)).split(/\r\n|\n|\r/);
    if (lines[lines.length - 1] === "") lines.pop();
    return files.length > 1 ? [`=== ${file.name} ===`, ...lines] : lines;
  });
}

/** Each line as a number, equal for equal lines, so that comparing is quick however long they are. */
function numbered(lines: readonly string[], numbers: Map<string, number>): number[] {
  return lines.map((line) => {
    const number = numbers.get(line) ?? numbers.size;
    numbers.set(line, number);
    return number;
  });
}

/** A stretch of both texts that differs: from and to (not included) by line, counted from 0. */
interface Stretch {
  fromA: number;
  toA: number;
  fromB: number;
  toB: number;
}

/** Stretches that differ, in order; null where the texts differ in more than the bounds allow. */
function differingStretches(a: readonly string[], b: readonly string[]): Stretch[] | null {
  let head = 0;
  while (head < a.length && head < b.length && a[head] === b[head]) head++;
  let tail = 0;
  while (
    tail < a.length - head &&
    tail < b.length - head &&
    a[a.length - 1 - tail] === b[b.length - 1 - tail]
  )
    tail++;
  const whole = { fromA: head, toA: a.length - tail, fromB: head, toB: b.length - tail };
  if (whole.fromA === whole.toA || whole.fromB === whole.toB)
    return whole.toA - whole.fromA + whole.toB - whole.fromB > 0 ? [whole] : [];
  const numbers = new Map<string, number>();
  const middleA = numbered(a.slice(head, a.length - tail), numbers);
  const middleB = numbered(b.slice(head, b.length - tail), numbers);
  const maxEditLength = Math.min(MOST_EDITS, Math.floor(MOST_STEPS / (1 + middleA.length + middleB.length)));
  const changes = diffArrays(middleA, middleB, { maxEditLength });
  if (!changes) return null;
  const stretches: Stretch[] = [];
  let atA = head;
  let atB = head;
  let open: Stretch | null = null;
  for (const { added, removed, count } of changes) {
    if (!added && !removed) {
      atA += count;
      atB += count;
      open = null;
      continue;
    }
    if (!open) {
      open = { fromA: atA, toA: atA, fromB: atB, toB: atB };
      stretches.push(open);
    }
    if (removed) atA += count;
    else atB += count;
    open.toA = atA;
    open.toB = atB;
  }
  return stretches;
}

const shown = (line: string) => (line.length > LONGEST_LINE ? `${line.slice(0, LONGEST_LINE)}…` : line);

/** Stretches with the lines around them; those whose surroundings touch are one hunk. */
function hunksOf(stretches: readonly Stretch[], a: readonly string[], b: readonly string[]): Hunk[] {
  const hunks: Hunk[] = [];
  let writtenTo = 0;
  stretches.forEach((stretch, i) => {
    const before = i === 0 ? 0 : stretches[i - 1].toA;
    const after = stretches[i + 1]?.fromA ?? a.length;
    const contextFrom = Math.max(stretch.fromA - CONTEXT_LINES, before, writtenTo);
    const contextTo = Math.min(stretch.toA + CONTEXT_LINES, after);
    const last = hunks[hunks.length - 1];
    const joins = last !== undefined && contextFrom === writtenTo;
    const fromB = stretch.fromB - (stretch.fromA - contextFrom);
    const hunk: Hunk = joins ? last : { fromA: contextFrom + 1, fromB: fromB + 1, lines: [] };
    if (!joins) hunks.push(hunk);
    const add = (kind: " " | "+" | "-", lines: readonly string[]) => {
      for (const line of lines) hunk.lines.push({ kind, text: shown(line) });
    };
    add(" ", a.slice(contextFrom, stretch.fromA));
    add("-", a.slice(stretch.fromA, stretch.toA));
    add("+", b.slice(stretch.fromB, stretch.toB));
    add(" ", a.slice(stretch.toA, contextTo));
    writtenTo = contextTo;
  });
  return hunks;
}

/** The first hunks, up to the most lines that are listed. */
function cut(hunks: readonly Hunk[]): { hunks: Hunk[]; truncated: boolean } {
  const listed: Hunk[] = [];
  let room = MOST_LISTED;
  for (const hunk of hunks) {
    if (hunk.lines.length > room) {
      if (room > 0) listed.push({ ...hunk, lines: hunk.lines.slice(0, room) });
      return { hunks: listed, truncated: true };
    }
    room -= hunk.lines.length;
    listed.push(hunk);
  }
  return { hunks: listed, truncated: false };
}

/**
 * The difference of two descriptions line by line (Myers' algorithm, npm `diff`), with three lines around each change and
 * at most 2,000 lines listed. Line ends and encodings do not count. `hunks` is null, and nothing is counted, where the
 * texts are larger than 128 MiB or differ in more than about 2,000 lines. Throws what decodeDescription throws.
 */
export function textDifference(a: readonly DescriptionFile[], b: readonly DescriptionFile[]): TextDifference {
  const none = { hunks: null, added: 0, removed: 0, truncated: true };
  const bytes = [...a, ...b].reduce((sum, file) => sum + file.bytes.length, 0);
  if (bytes > MOST_BYTES) return none;
  const linesA = linesOf(a);
  const linesB = linesOf(b);
  const stretches = differingStretches(linesA, linesB);
  if (!stretches) return none;
  return {
    ...cut(hunksOf(stretches, linesA, linesB)),
    added: stretches.reduce((sum, { fromB, toB }) => sum + toB - fromB, 0),
    removed: stretches.reduce((sum, { fromA, toA }) => sum + toA - fromA, 0),
  };
}
