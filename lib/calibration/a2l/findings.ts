import type { Description, DescriptionNote } from "@/lib/calibration/a2l/types";
import { FileRefusedError } from "@/lib/errors";

/** Most notes, skipped blocks and missing names that are listed; more are counted. */
const MOST_LISTED = 1000;
/** Most entries (numbers of a table, names of a set; a named thing counts as eight) of one description. */
const MOST_ENTRIES = 4_000_000;
export const ENTRIES_OF_A_THING = 8;

const LONGEST_TEXT = 300;

/** A text of the file as it fits into a sentence: a name may be as long as the file. */
export const cut = (text: string) => (text.length > LONGEST_TEXT ? `${text.slice(0, LONGEST_TEXT)}…` : text);

/** Where something stands. */
export interface Place {
  file: string;
  line: number;
}

/** What reading a description brings to light beside its contents. Bounded, whatever the file holds. */
export class Findings {
  readonly notes: DescriptionNote[] = [];
  readonly notRead: { keyword: string; name: string; reason: string; line: number }[] = [];
  readonly missingIncludes: string[] = [];
  private readonly missing = new Set<string>();
  private readonly saidOnce = new Set<string>();
  private notesLeftOut = 0;
  private blocksLeftOut = 0;
  private entries = 0;

  note(code: string, message: string, place: { file: string; line: number | null }): void {
    if (this.notes.length < MOST_LISTED)
      this.notes.push({ code, message: cut(message), file: place.file, line: place.line });
    else this.notesLeftOut++;
  }

  /** A note that would otherwise come again for every block of a kind. */
  noteOnce(code: string, key: string, message: string, place: Place): void {
    const said = `${code} ${key}`;
    if (this.saidOnce.size >= MOST_LISTED || this.saidOnce.has(said)) return;
    this.saidOnce.add(said);
    this.note(code, message, place);
  }

  skipped(keyword: string, name: string, reason: string, line: number): void {
    if (this.notRead.length < MOST_LISTED)
      this.notRead.push({ keyword: cut(keyword), name: cut(name), reason: cut(reason), line });
    else this.blocksLeftOut++;
  }

  /** A file that is included but was not given. */
  lacks(name: string): void {
    if (this.missing.size >= MOST_LISTED || this.missing.has(name)) return;
    this.missing.add(name);
    this.missingIncludes.push(name);
  }

  /** Counts what is kept, so that no file can fill the memory. Throws FileRefusedError `too_large`. */
  keep(entries: number, place: Place): void {
    this.entries += entries;
    if (this.entries > MOST_ENTRIES) {
      throw new FileRefusedError(
        "too_large",
        `Line ${place.line} of ${place.file}: the description holds more entries than can be read. Split it by module.`,
        { line: place.line },
      );
    }
  }

  /** Hands over what was found; what was not listed is told in a last note. */
  close(file: string): Pick<Description, "notes" | "notRead" | "missingIncludes"> {
    if (this.notesLeftOut + this.blocksLeftOut > 0) {
      this.notes.push({
        code: "more_not_listed",
        message: `${this.notesLeftOut} more notes and ${this.blocksLeftOut} more blocks that were not read are not listed.`,
        file,
        line: null,
      });
    }
    return { notes: this.notes, notRead: this.notRead, missingIncludes: this.missingIncludes };
  }
}
