/** What a token of a description is; `begin` and `end` are the words /begin and /end themselves. */
export type TokenKind = "word" | "string" | "begin" | "end" | "include" | "nothing";

/** A place in a file's bytes and the token read last. One object per file, changed in place: no token is an object. */
export interface TokenState {
  readonly bytes: Uint8Array;
  /** Where the next token is looked for. */
  at: number;
  /** First byte of the token read last, a string's without its quote, and one past its last. */
  start: number;
  end: number;
  /** A string that holds a quote by `\"` or `""`, or another backslash. */
  escaped: boolean;
}

/** A comment or string that begins at `start` and never ends. */
export class NotClosed {
  constructor(readonly what: "comment" | "string") {}
}

const OTHER = 0;
const BLANK = 1;
const QUOTE = 2;
const SLASH = 3;
const QUOTE_BYTE = 34;
const STAR_BYTE = 42;
const SLASH_BYTE = 47;
const BACKSLASH_BYTE = 92;
const LINE_FEED = 10;
const CARRIAGE_RETURN = 13;

/** Control characters count as blanks: the DOS end mark and the like stand at the end of old files. */
const CLASS = new Uint8Array(256).fill(OTHER);
CLASS.fill(BLANK, 0, 33);
CLASS[QUOTE_BYTE] = QUOTE;
CLASS[SLASH_BYTE] = SLASH;

const lettersOf = (word: string) => new TextEncoder().encode(word);
const BEGIN = lettersOf("/begin");
const END = lettersOf("/end");
const INCLUDE = lettersOf("/include");

/** Whether a word is one of the three, in small or capital letters. */
function isDirective(bytes: Uint8Array, start: number, end: number, word: Uint8Array): boolean {
  if (end - start !== word.length) return false;
  for (let i = 1; i < word.length; i++) if ((bytes[start + i] | 0x20) !== word[i]) return false;
  return true;
}

/** Whether a slash ends the word before it: a comment, /begin or /end stands right behind. Any other belongs to the word. */
function endsWord(bytes: Uint8Array, at: number): boolean {
  const next = bytes[at + 1];
  if (next === STAR_BYTE || next === SLASH_BYTE) return true;
  let to = at + 1;
  while (to <= at + BEGIN.length && CLASS[bytes[to]] === OTHER) to++;
  return isDirective(bytes, at, to, BEGIN) || isDirective(bytes, at, to, END);
}

/** One past a comment that begins at `at`, -1 when it never ends, `at` when none begins there. */
function commentEnd(bytes: Uint8Array, at: number): number {
  const second = bytes[at + 1];
  if (second === STAR_BYTE) {
    for (let to = bytes.indexOf(STAR_BYTE, at + 2); to >= 0; to = bytes.indexOf(STAR_BYTE, to + 1))
      if (bytes[to + 1] === SLASH_BYTE) return to + 2;
    return -1;
  }
  if (second !== SLASH_BYTE) return at;
  let to = at + 2;
  while (to < bytes.length && bytes[to] !== LINE_FEED && bytes[to] !== CARRIAGE_RETURN) to++;
  return to;
}

function scanString(state: TokenState, from: number): TokenKind | NotClosed {
  const { bytes } = state;
  let at = from + 1;
  state.start = at;
  state.escaped = false;
  for (; at < bytes.length; at++) {
    const byte = bytes[at];
    if (byte === BACKSLASH_BYTE) {
      state.escaped = true;
      at++;
    } else if (byte === QUOTE_BYTE) {
      if (bytes[at + 1] !== QUOTE_BYTE) {
        state.end = at;
        state.at = at + 1;
        return "string";
      }
      state.escaped = true;
      at++;
    }
  }
  return new NotClosed("string");
}

/**
 * Reads the next token: words between blanks, `"strings"` with `\"` and `""`, comments of both kinds passed over.
 * Takes time in proportion to the bytes it passes. Returns NotClosed for a string or comment without an end.
 */
export function scanToken(state: TokenState): TokenKind | NotClosed {
  const { bytes } = state;
  const length = bytes.length;
  let at = state.at;
  for (;;) {
    while (at < length && CLASS[bytes[at]] === BLANK) at++;
    state.start = at;
    if (at >= length) {
      state.at = length;
      state.end = length;
      return "nothing";
    }
    if (bytes[at] === QUOTE_BYTE) return scanString(state, at);
    if (bytes[at] !== SLASH_BYTE) break;
    const to = commentEnd(bytes, at);
    if (to < 0) return new NotClosed("comment");
    if (to === at) break;
    at = to;
  }
  for (at++; at < length; at++) {
    const kind = CLASS[bytes[at]];
    if (kind !== OTHER) {
      if (kind !== SLASH) break;
      if (endsWord(bytes, at)) break;
    }
  }
  state.at = at;
  state.end = at;
  state.escaped = false;
  const { start } = state;
  if (bytes[start] !== SLASH_BYTE) return "word";
  if (isDirective(bytes, start, at, BEGIN)) return "begin";
  if (isDirective(bytes, start, at, END)) return "end";
  return isDirective(bytes, start, at, INCLUDE) ? "include" : "word";
}

/**
 * Passes over an A2ML block, whose body has a grammar of its own, to behind its `/end A2ML`; comments and strings are
 * heeded, a quote without a partner on its line is not. False when there is no such end.
 */
export function passA2ml(state: TokenState): boolean {
  const { bytes } = state;
  let at = state.at;
  while (at < bytes.length) {
    const byte = bytes[at];
    if (byte === QUOTE_BYTE) {
      let to = at + 1;
      while (to < bytes.length && bytes[to] !== QUOTE_BYTE && bytes[to] !== LINE_FEED) to++;
      at = bytes[to] === QUOTE_BYTE ? to + 1 : at + 1;
    } else if (byte === SLASH_BYTE) {
      const to = commentEnd(bytes, at);
      if (to < 0) return false;
      if (to > at) at = to;
      else if (isDirective(bytes, at, at + END.length, END)) {
        state.at = at + END.length;
        if (scanToken(state) === "word" && wordIs(state, "A2ML")) return true;
        at += END.length;
      } else at++;
    } else at++;
  }
  return false;
}

/** Whether the token read last is this text of ASCII letters, without making a string of it. */
export function wordIs({ bytes, start, end }: TokenState, text: string): boolean {
  if (end - start !== text.length) return false;
  for (let i = 0; i < text.length; i++) if (bytes[start + i] !== text.charCodeAt(i)) return false;
  return true;
}
