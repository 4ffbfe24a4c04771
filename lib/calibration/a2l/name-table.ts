import type { TokenState } from "@/lib/calibration/a2l/scan-token";

const MOST_NAMES = 1_000_000;
const LARGEST_ASCII = 0x7f;
/** Offset basis and prime of the FNV-1a hash of 32 bits. */
const BASIS = 0x811c9dc5;
const PRIME = 0x01000193;

/** Whether a text is these bytes. */
function isText(text: string, { bytes, start, end }: TokenState): boolean {
  if (text.length !== end - start) return false;
  for (let i = 0; i < text.length; i++) if (text.charCodeAt(i) !== bytes[start + i]) return false;
  return true;
}

/**
 * One string for tokens alike. Names and keywords come again and again: a known one is found by a hash of its bytes,
 * without making a string of the token. Of names with equal hashes the newest is known, so that none is searched for.
 */
export class NameTable {
  private readonly byHash = new Map<number, string>();

  /** The token's text; `text` makes it and is asked for only when it is not known. */
  find(token: TokenState, text: () => string): string {
    const { bytes, start, end } = token;
    let hash = BASIS;
    let joined = 0;
    for (let at = start; at < end; at++) {
      hash = Math.imul(hash ^ bytes[at], PRIME);
      joined |= bytes[at];
    }
    if (joined > LARGEST_ASCII || token.escaped) return text();
    const known = this.byHash.get(hash);
    if (known !== undefined && isText(known, token)) return known;
    const made = text();
    if (known !== undefined || this.byHash.size < MOST_NAMES) this.byHash.set(hash, made);
    return made;
  }
}
