import { PASSED_BLOCKS, PASSED_KEYWORDS } from "@/lib/calibration/a2l/blocks/passed-keywords";
import type { Findings, Place } from "@/lib/calibration/a2l/findings";
import { passA2ml, wordIs } from "@/lib/calibration/a2l/scan-token";
import type { TokenSource } from "@/lib/calibration/a2l/token-source";

const KEYWORD = /^[A-Z][A-Z\d_]+$/;
const LEAST_INFINITE = /^[+-]?(inf(inity)?|\d\.#inf\w*)$/i;

/**
 * Reads blocks: parameters in their order, then options in any. Known blocks lie a few deep in one another; the others
 * are passed over by counting, so that no input makes calls nest. What is wrong with a block is kept in `fault`.
 */
export class BlockReader {
  /** First thing wrong since it was last cleared; the block is then not read, the file still is. */
  fault: string | null = null;
  /** Functions that characteristics and shared axes say they belong to; a module takes them when it ends. */
  listedFunctions: { name: string; member: string }[] = [];
  /** Where the block read last begins. */
  begun: Place = { file: "", line: 1 };
  private readonly stack: { keyword: string; place: Place }[] = [];

  constructor(
    private readonly source: TokenSource,
    readonly findings: Findings,
  ) {}

  /** The next option of the block: a keyword, or `/KEYWORD` for a block that was entered; null at the block's end. */
  option(): string | null {
    for (;;) {
      const kind = this.source.next();
      if (kind === "end") {
        this.leave();
        return null;
      }
      if (kind === "nothing") {
        if (this.stack.length > 0) this.refuseOpen();
        return null;
      }
      if (kind === "begin") return `/${this.enter()}`;
      if (kind === "word" && this.source.isName) return this.source.name();
    }
  }

  private enter(): string {
    const place = this.source.place();
    if (this.source.next() !== "word")
      this.source.refuse("unexpected_text", "/begin is not followed by a keyword.", place);
    const keyword = this.source.name();
    this.stack.push({ keyword, place });
    this.begun = place;
    return keyword;
  }

  /** Reads the name behind /end and checks that it is the innermost block's. */
  private leave(): void {
    const at = this.source.place();
    const kind = this.source.next();
    const block = this.stack.pop();
    if (!block) this.source.refuse("unbalanced_block", "/end closes a block that was never begun.", at);
    if (kind === "word" && wordIs(this.source.state, block.keyword)) return;
    const name = kind === "word" ? ` ${this.source.shown()}` : "";
    const { keyword, place } = block;
    this.source.refuse(
      "unbalanced_block",
      `/end${name} does not close the block ${keyword} that was begun in line ${place.line} of ${place.file}.`,
      at,
    );
  }

  private refuseOpen(): never {
    const { keyword, place } = this.stack[this.stack.length - 1];
    return this.source.refuse(
      "unbalanced_block",
      `the block ${keyword} is never closed by /end ${keyword}. The file may be cut off.`,
      place,
    );
  }

  /** Passes over an option that is not needed; of unknown ones a person is told once. */
  pass(option: string, inside: string): void {
    if (option.startsWith("/")) {
      if (!PASSED_BLOCKS.has(option)) this.noteUnknown(`block ${option.slice(1)}`, inside, this.begun);
      this.passBlock();
      return;
    }
    const parameters = PASSED_KEYWORDS.get(option);
    if (parameters === undefined) {
      if (KEYWORD.test(option)) this.noteUnknown(`keyword ${option}`, inside, this.source.place());
      return;
    }
    for (let i = 0; i < parameters && this.isParameter(this.source.next()); i++);
  }

  private noteUnknown(what: string, inside: string, place: Place): void {
    const message = `The ${what} in ${inside} is not known and was passed over.`;
    this.findings.noteOnce("keyword_unknown", `${what} ${inside}`, message, place);
  }

  /** Passes over the rest of the block that was entered last, whatever lies in it. */
  passBlock(): void {
    for (let depth = 1; depth > 0; ) {
      const kind = this.source.next();
      if (kind === "nothing") this.refuseOpen();
      if (kind === "begin") {
        depth++;
        this.source.next();
      } else if (kind === "end") {
        depth--;
        if (depth > 0) this.source.next();
        else this.leave();
      }
    }
  }

  /** Passes over an A2ML block by its own rules. */
  passA2ml(): void {
    if (!passA2ml(this.source.state)) this.refuseOpen();
    this.stack.pop();
  }

  /** Tells parameters from what ends them; the latter comes again. */
  private isParameter(kind: string): boolean {
    if (kind === "word" || kind === "string") return true;
    this.source.hold();
    return false;
  }

  private lacks(what: string): void {
    this.fault ??= `its ${what} is missing`;
  }

  /** A parameter as text, quoted or not. */
  word(what: string): string {
    if (this.isParameter(this.source.next())) return this.source.name();
    this.lacks(what);
    return "";
  }

  /** A quoted parameter; "" where there is none. */
  quoted(): string {
    if (this.source.next() === "string") return this.source.text();
    this.source.hold();
    return "";
  }

  /** A name, null where it is the word for none. */
  reference(what: string, none: string): string | null {
    const name = this.word(what);
    return name === none ? null : name;
  }

  number(what: string): number {
    if (!this.isParameter(this.source.next())) {
      this.lacks(what);
      return Number.NaN;
    }
    const value = this.source.number();
    if (Number.isNaN(value)) this.fault ??= `its ${what} "${this.source.shown()}" is no number`;
    return value;
  }

  /** A count, size or address: a whole number from 0 to 2^53. */
  whole(what: string): number {
    const value = this.number(what);
    if (!Number.isNaN(value) && !(Number.isSafeInteger(value) && value >= 0))
      this.fault ??= `its ${what} ${value} is no whole number from 0 on`;
    return value;
  }

  /** A limit; the words that some tools write for infinity stand for the largest number. */
  limit(what: string): number {
    if (this.isParameter(this.source.next())) {
      const isInfinite = this.source.kind === "word" && LEAST_INFINITE.test(this.source.shown());
      if (isInfinite) return this.source.text().startsWith("-") ? -Number.MAX_VALUE : Number.MAX_VALUE;
    }
    this.source.hold();
    return this.number(what);
  }

  /** Numbers as far as they go, at most `most` of them. */
  numbers(most: number): number[] {
    const values: number[] = [];
    while (values.length < most && this.source.next() === "word") {
      const value = this.source.number();
      if (Number.isNaN(value)) break;
      values.push(value);
      this.findings.keep(1, this.begun);
    }
    if (values.length < most) this.source.hold();
    return values;
  }

  /** The names in a block that holds nothing else, up to its end. */
  names(): string[] {
    const names: string[] = [];
    for (;;) {
      const kind = this.source.next();
      if (this.isParameter(kind)) {
        names.push(this.source.name());
        this.findings.keep(1, this.begun);
      } else if (this.option() === null) return names;
      else this.passBlock();
    }
  }
}
