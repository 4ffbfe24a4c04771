import type { ImageSegment } from "@/lib/calibration/image/types";

const hex = (value: number, digits: number) => value.toString(16).toUpperCase().padStart(digits, "0");

/** One Intel HEX record with its two's complement checksum. */
export function hexRecord(type: number, offset: number, data: readonly number[]): string {
  const bytes = [data.length, offset >> 8, offset & 0xff, type, ...data];
  const sum = bytes.reduce((total, byte) => total + byte, 0);
  return `:${[...bytes, (256 - (sum % 256)) % 256].map((byte) => hex(byte, 2)).join("")}`;
}

/** One Motorola S-record with its one's complement checksum. */
export function sRecord(type: number, address: number, data: readonly number[]): string {
  const width = [2, 2, 3, 4, 2, 2, 3, 4, 3, 2][type];
  const addressBytes = Array.from(
    { length: width },
    (_, i) => Math.floor(address / 256 ** (width - 1 - i)) % 256,
  );
  const bytes = [width + data.length + 1, ...addressBytes, ...data];
  const sum = bytes.reduce((total, byte) => total + byte, 0);
  return `S${type}${[...bytes, 255 - (sum % 256)].map((byte) => hex(byte, 2)).join("")}`;
}

/** Splits segments into records of at most `size` bytes that do not cross a 64 KiB bank. */
export function records(
  segments: readonly ImageSegment[],
  size: number,
): { address: number; data: number[] }[] {
  return segments.flatMap(({ address, bytes }) => {
    const out: { address: number; data: number[] }[] = [];
    for (let i = 0; i < bytes.length; ) {
      const room = 65536 - ((address + i) % 65536);
      const length = Math.min(size, bytes.length - i, room);
      out.push({ address: address + i, data: Array.from(bytes.subarray(i, i + length)) });
      i += length;
    }
    return out;
  });
}
