import type { TokenState } from "@/lib/calibration/a2l/scan-token";

const WRITTEN = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
const HEXADECIMAL = /^([+-]?)0x([\da-f]+)$/i;
/** Digits that a number has at most while sums of them stay exact. */
const PLAIN_DIGITS = 15;
const HEX_DIGITS = 13;
const DIGIT_ZERO = 48;
const DOT = 46;
const MINUS = 45;
const LETTER_X = 120;
const LETTER_A = 97;
const SMALL = 0x20;

/** Short decimal numbers, with a point or not; NaN for all others. Exact, since both parts of the division are. */
function plainDecimal(bytes: Uint8Array, from: number, end: number): number {
  let value = 0;
  let divisor = 0;
  for (let at = from; at < end; at++) {
    const digit = bytes[at] - DIGIT_ZERO;
    if (digit >= 0 && digit <= 9) {
      value = value * 10 + digit;
      divisor *= 10;
    } else if (bytes[at] === DOT && divisor === 0) divisor = 1;
    else return Number.NaN;
  }
  return divisor > 1 ? value / divisor : divisor === 1 ? Number.NaN : value;
}

/** Short hexadecimal numbers without their 0x; NaN for all others. */
function plainHexadecimal(bytes: Uint8Array, from: number, end: number): number {
  let value = 0;
  for (let at = from; at < end; at++) {
    const digit = bytes[at] - DIGIT_ZERO;
    const letter = (bytes[at] | SMALL) - LETTER_A;
    if (digit >= 0 && digit <= 9) value = value * 16 + digit;
    else if (letter >= 0 && letter <= 5) value = value * 16 + letter + 10;
    else return Number.NaN;
  }
  return value;
}

/**
 * The token's number: decimal, 0x hexadecimal, with exponent. NaN where it is no number or lies beyond a double.
 * Short ones, nearly all, are read from the bytes; `text` is asked for only for the others.
 */
export function tokenNumber({ bytes, start, end }: TokenState, text: () => string): number {
  const negative = bytes[start] === MINUS;
  const from = negative ? start + 1 : start;
  const isHexadecimal = bytes[from] === DIGIT_ZERO && (bytes[from + 1] | SMALL) === LETTER_X;
  let plain = Number.NaN;
  if (isHexadecimal && end - from > 2 && end - from <= HEX_DIGITS + 2)
    plain = plainHexadecimal(bytes, from + 2, end);
  else if (end > from && end - from <= PLAIN_DIGITS) plain = plainDecimal(bytes, from, end);
  if (!Number.isNaN(plain)) return negative ? 0 - plain : plain;
  const written = text();
  const hexadecimal = HEXADECIMAL.exec(written);
  const value = hexadecimal
    ? Number(`0x${hexadecimal[2]}`) * (hexadecimal[1] === "-" ? -1 : 1)
    : WRITTEN.test(written)
      ? Number(written)
      : Number.NaN;
  return Number.isFinite(value) ? value + 0 : Number.NaN;
}

/** A mask as a whole number of up to 64 bits; null where the text is none. */
export function maskNumber(written: string): bigint | null {
  if (!/^(0x[\da-f]{1,16}|\d{1,20})$/i.test(written)) return null;
  const mask = BigInt(written);
  return mask < 1n << 64n ? mask : null;
}
