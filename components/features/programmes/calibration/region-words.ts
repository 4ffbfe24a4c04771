import { addressText } from "@/components/ui/data/address-text";
import type { ChecksumRegion } from "@/lib/calibration/image/checksum-regions";

export const ALGORITHM_WORDS: Record<ChecksumRegion["algorithm"], string> = {
  crc32: "CRC, 32 bits",
  crc16: "CRC, 16 bits",
  sum8: "sum, 8 bits",
  sum16: "sum, 16 bits",
  sum32: "sum, 32 bits",
};

export const ORDER_WORDS: Record<ChecksumRegion["byteOrder"], string> = {
  little: "low byte first",
  big: "high byte first",
};

export const COMPLEMENT_WORDS = {
  none: "as it is",
  ones: "ones' complement",
  twos: "twos' complement",
} as const;

/** A number of a region as it is typed: 0xFFFFFFFF. */
export const hexText = (value: number) => `0x${value.toString(16).toUpperCase()}`;

/** How the checksum is made, in one line. */
export function parametersText({ parameters }: ChecksumRegion): string {
  if ("polynomial" in parameters) {
    const { polynomial, initial, reflectIn, reflectOut, finalXor } = parameters;
    const reflected = [...(reflectIn ? ["input"] : []), ...(reflectOut ? ["output"] : [])].join(" and ");
    return `polynomial ${hexText(polynomial)}, start ${hexText(initial)}, ${reflected || "nothing"} reflected, final XOR ${hexText(finalXor)}`;
  }
  const { wordBytes, wordOrder, complement } = parameters;
  const words = wordBytes === 1 ? "bytes" : `words of ${wordBytes} bytes, ${ORDER_WORDS[wordOrder]}`;
  return `sum of ${words}, ${COMPLEMENT_WORDS[complement]}`;
}

/** Stretches inside that are passed over. */
export function excludedText({ excluded = [] }: ChecksumRegion): string {
  return excluded.map(({ from, to }) => `${addressText(from)}–${addressText(to)}`).join(", ");
}
