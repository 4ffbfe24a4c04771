const SPACES = /[\s\u00a0\u202f]/g;
const PLAIN = /^[+-]?\d+(\.\d+)?$/;

/**
 * A number as a person types it: point or comma as decimal mark, spaces between thousands, U+2212 or a hyphen as minus.
 * "1,286.5" and "1.286,5" are refused rather than guessed at.
 * @returns NaN where it is no such number, also for an empty text
 * @example readTypedNumber("1 286,5") // 1286.5
 */
export function readTypedNumber(text: string): number {
  const bare = text.replace(SPACES, "").replace("\u2212", "-");
  const pointed = /^[^.,]*,[^.,]*$/.test(bare) ? bare.replace(",", ".") : bare;
  return PLAIN.test(pointed) ? Number(pointed) : Number.NaN;
}
