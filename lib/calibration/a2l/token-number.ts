import type { TokenState } from "@/lib/calibration/a2l/scan-token";

const WRITTEN = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
const HEXADECIMAL = /^([+-]?)0x([\da-f]+)$/i;
/** Digits that a number has at most while sums of them stay exact. */
const PLAIN_DIGITS = 15;
const DIGIT_ZERO = 48;
const MINUS = 45;

/**
 * The token's number: decimal, 0x hexadecimal, with exponent. NaN where it is no number or lies beyond a double.
 * Short whole numbers, nearly all, are read from the bytes; `text` is asked for only for the others.
 */
export function tokenNumber({ bytes, start, end }: TokenState, text: () => string): number {
  const negative = bytes[start] === MINUS;
  const from = negative ? start + 1 : start;
  if (end > from && end - from <= PLAIN_DIGITS) {
    let value = 0;
    let at = from;
    for (; at < end; at++) {
      const digit = bytes[at] - DIGIT_ZERO;
      if (digit < 0 || digit > 9) break;
      value = value * 10 + digit;
    }
    if (at === end) return negative ? -value : value;
  }
  const written = text();
  const hexadecimal = HEXADECIMAL.exec(written);
  const value = hexadecimal
    ? Number(`0x${hexadecimal[2]}`) * (hexadecimal[1] === "-" ? -1 : 1)
    : WRITTEN.test(written)
      ? Number(written)
      : Number.NaN;
  return Number.isFinite(value) ? value : Number.NaN;
}

/** A mask as a whole number of up to 64 bits; null where the text is none. */
export function maskNumber(written: string): bigint | null {
  if (!/^(0x[\da-f]{1,16}|\d{1,20})$/i.test(written)) return null;
  const mask = BigInt(written);
  return mask < 1n << 64n ? mask : null;
}
