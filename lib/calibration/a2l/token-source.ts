import { type DescriptionText, decodeDescription } from "@/lib/calibration/a2l/decode-description";
import { cut, type Findings, type Place } from "@/lib/calibration/a2l/findings";
import { NameTable } from "@/lib/calibration/a2l/name-table";
import { NotClosed, scanToken, type TokenKind, type TokenState } from "@/lib/calibration/a2l/scan-token";
import { tokenNumber } from "@/lib/calibration/a2l/token-number";
import type { DescriptionFile } from "@/lib/calibration/a2l/types";
import { FileRefusedError } from "@/lib/errors";

/** Largest text of a description with everything it includes, bytes, and most files included. */
const MOST_BYTES = 512 * 1024 * 1024;
const MOST_INCLUSIONS = 10_000;
const LONGEST_SHOWN = 60;
const LINE_FEED = 10;
const SLASH = 47;

interface OpenFile extends TokenState {
  text: DescriptionText;
  /** Lines counted so far, up to this byte. */
  countedTo: number;
  countedLine: number;
}

const baseName = (path: string) => path.slice(Math.max(path.lastIndexOf("/"), path.lastIndexOf("\\")) + 1);

/** The tokens of a description over all its files: an included file's come where it is included. */
export class TokenSource {
  /** What the current token is. */
  kind: TokenKind = "nothing";
  private file: OpenFile;
  private readonly open: OpenFile[];
  private readonly texts = new Map<string, DescriptionText>();
  private readonly names = new NameTable();
  private readonly makeText = () => this.text();
  private held = false;
  private inclusions = 0;
  private bytesOpened = 0;

  /** `files`: the main one first. Refuses an empty file and one that is no text. */
  constructor(
    private readonly files: readonly DescriptionFile[],
    readonly findings: Findings,
  ) {
    if (files.length === 0) throw new FileRefusedError("empty_file", "There is no description file.");
    this.file = this.opened(files[0]);
    this.open = [this.file];
  }

  get encoding(): string {
    return this.open[0].text.encoding;
  }

  /** Moves to the next token, into and out of included files; "nothing" at the end of all. */
  next(): TokenKind {
    if (this.held) {
      this.held = false;
      return this.kind;
    }
    for (;;) {
      const kind = scanToken(this.file);
      if (kind instanceof NotClosed) return this.refuseNotClosed(kind);
      if (kind === "include") this.include();
      else if (kind === "nothing" && this.open.length > 1) {
        this.open.pop();
        this.file = this.open[this.open.length - 1];
      } else {
        this.kind = kind;
        return kind;
      }
    }
  }

  /** The current token comes again with the next call of `next`. */
  hold(): void {
    this.held = true;
  }

  /** The state of the file being read, for scanning its bytes by other rules. */
  get state(): TokenState {
    return this.file;
  }

  /** Whether the current word begins as names and keywords do, not with a slash. */
  get isName(): boolean {
    return this.file.bytes[this.file.start] !== SLASH;
  }

  /** The current token's text, strings with their escapes resolved. */
  text(): string {
    const { bytes, start, end, escaped, text } = this.file;
    const value = text.decoder.decode(bytes.subarray(start, end));
    return escaped ? value.replace(/\\(["\\])|""/g, (_, mark) => mark ?? '"') : value;
  }

  /** The current token's text, one string for all tokens alike: names come again and again. */
  name(): string {
    return this.names.find(this.file, this.makeText);
  }

  /** The current token as a number, NaN where it is none. */
  number(): number {
    return tokenNumber(this.file, this.makeText);
  }

  /** The current token cut to what fits into a sentence. */
  shown(): string {
    const text = this.text();
    return text.length > LONGEST_SHOWN ? `${text.slice(0, LONGEST_SHOWN)}…` : text;
  }

  /** Where the current token begins. */
  place(): Place {
    const { file } = this;
    if (file.start < file.countedTo) {
      file.countedTo = 0;
      file.countedLine = 1;
    }
    for (let at = file.countedTo; at < file.start; at++) if (file.bytes[at] === LINE_FEED) file.countedLine++;
    file.countedTo = file.start;
    return { file: file.text.name, line: file.countedLine };
  }

  /** Refuses the description at a place. */
  refuse(code: string, reason: string, place: Place = this.place()): never {
    const { file, line } = place;
    throw new FileRefusedError(code, cut(`Line ${line} of ${file}: ${reason}`), { file, line });
  }

  private refuseNotClosed({ what }: NotClosed): never {
    const missing = what === "comment" ? "comment is never closed by */" : "text is never closed by a quote";
    return this.refuse(`${what}_not_closed`, `this ${missing}. The file may be cut off.`);
  }

  private opened(file: DescriptionFile): OpenFile {
    const text = this.texts.get(file.name) ?? decodeDescription(file);
    this.texts.set(file.name, text);
    this.bytesOpened += text.bytes.length;
    if (this.bytesOpened > MOST_BYTES) {
      throw new FileRefusedError(
        "too_large",
        `With ${file.name} the description passes ${MOST_BYTES / 1024 / 1024} MiB. Split it by module.`,
      );
    }
    const { bytes, start } = text;
    return {
      ...{ text, bytes, at: start, start, end: start, escaped: false },
      ...{ countedTo: 0, countedLine: 1 },
    };
  }

  /** Goes into the file named behind `/include`; one that was not given is listed and passed over. */
  private include(): void {
    const place = this.place();
    const kind = scanToken(this.file);
    if (kind instanceof NotClosed) this.refuseNotClosed(kind);
    if (kind !== "word" && kind !== "string")
      this.refuse("unexpected_text", "/include is not followed by the name of a file.", place);
    const written = this.text().trim();
    const wanted = baseName(written);
    const given =
      this.files.find(({ name }) => name === written) ??
      this.files.find(({ name }) => baseName(name) === wanted) ??
      this.files.find(({ name }) => baseName(name).toLowerCase() === wanted.toLowerCase());
    if (!given) {
      this.findings.lacks(cut(written));
      return;
    }
    if (this.open.some(({ text }) => text.name === given.name)) {
      const chain = this.open.map(({ text }) => text.name).slice(-5);
      this.refuse(
        "include_cycle",
        `${[...chain, given.name].join(" includes ")}. Remove one of them.`,
        place,
      );
    }
    this.inclusions++;
    if (this.inclusions > MOST_INCLUSIONS)
      this.refuse("too_large", `more than ${MOST_INCLUSIONS} files are included one in another.`, place);
    this.file = this.opened(given);
    this.open.push(this.file);
  }
}
