/** A run of bytes without a gap. "No byte here" is not the same as 0xFF. */
export interface ImageSegment {
  /** Address of the first byte, 0 to 2^32 − 1. */
  address: number;
  bytes: Uint8Array;
}

/** Something about the file that a person should know; the image itself is not in doubt. */
export interface ImageNote {
  code: string;
  message: string;
}

/** A calibration image as sparse segments: sorted by address, merged where they touch, never overlapping. */
export interface CalibrationImage {
  container: "intel-hex" | "s-record" | "binary";
  segments: ImageSegment[];
  /** Start (execution) address stated by the file, or null. */
  startAddress: number | null;
  /** Header text of an S-record file, or null. */
  header: string | null;
  notes: ImageNote[];
}

/** Reasons for which an image is refused: data in doubt is never read. */
export const IMAGE_REFUSALS = [
  "empty_file",
  "no_data",
  "base_address_missing",
  "address_out_of_range",
  "line_not_a_record",
  "record_cut_off",
  "record_length_wrong",
  "checksum_wrong",
  "record_type_unknown",
  "record_offset_wrong",
  "address_wraps",
  "overlap_differs",
  "no_end_record",
  "data_after_end",
  "record_count_wrong",
] as const;

/** One past the highest address of a 32-bit image. */
export const ADDRESS_LIMIT = 2 ** 32;

/** An address as people write it: 0x810000. */
export function formatAddress(address: number): string {
  return `0x${address.toString(16).toUpperCase()}`;
}
