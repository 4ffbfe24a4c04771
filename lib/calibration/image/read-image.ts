import { readIntelHex } from "@/lib/calibration/image/read-intel-hex";
import { readSRecord } from "@/lib/calibration/image/read-s-record";
import { ADDRESS_LIMIT, type CalibrationImage, formatAddress } from "@/lib/calibration/image/types";
import { FileRefusedError } from "@/lib/errors";

export interface ReadImageOptions {
  /** Name of the file: its ending tells a damaged record file from raw bytes. */
  fileName: string;
  /** Address of the first byte of a raw binary; not used for files that state their addresses. */
  baseAddress?: number;
}

const HEAD_BYTES = 4096;
const HEX_NAME = /\.(hex|ihex|ihx|h86|hex32)$/i;
const S_RECORD_NAME = /\.(s19|s28|s37|srec|s-rec|mot|sx|s)$/i;

/** Which container the bytes are: by content first; a record file's name makes bytes that are no record a refusal. */
function sniffContainer(bytes: Uint8Array, fileName: string): CalibrationImage["container"] {
  const head = new TextDecoder("latin1")
    .decode(bytes.subarray(0, HEAD_BYTES))
    .replace(/^\u00ef\u00bb\u00bf/, "");
  // biome-ignore lint/suspicious/noControlCharactersInRegex: text holds no control characters but line ends and the DOS end mark
  const isText = !/[\u0000-\u0008\u000e-\u0019\u001b-\u001f\u007f-\u009f]/.test(head);
  if (isText && /^\s*:/.test(head)) return "intel-hex";
  if (isText && /^\s*s\d/i.test(head)) return "s-record";
  if (HEX_NAME.test(fileName) || (isText && /^:[\da-f]{10}/im.test(head))) return "intel-hex";
  if (S_RECORD_NAME.test(fileName) || (isText && /^s[0-9][\da-f]{6}/im.test(head))) return "s-record";
  return "binary";
}

/**
 * Reads a calibration image: Intel HEX, Motorola S-record or raw binary with a base address, as sparse sorted segments.
 * Throws FileRefusedError with a code of IMAGE_REFUSALS; record files name the line. Data in doubt are refused.
 */
export function readImage(bytes: Uint8Array, options: ReadImageOptions): CalibrationImage {
  if (bytes.length === 0) throw new FileRefusedError("empty_file", "The file is empty.");
  const { baseAddress } = options;
  const container = sniffContainer(bytes, options.fileName);
  if (container !== "binary") {
    const image = container === "intel-hex" ? readIntelHex(bytes) : readSRecord(bytes);
    if (baseAddress !== undefined) {
      image.notes.push({
        code: "base_address_not_used",
        message: "The file states its own addresses; the base address given was not used.",
      });
    }
    return image;
  }
  if (baseAddress === undefined) {
    throw new FileRefusedError(
      "base_address_missing",
      "A raw binary does not say where its bytes lie. Give the address of its first byte.",
    );
  }
  if (!Number.isInteger(baseAddress) || baseAddress < 0 || baseAddress + bytes.length > ADDRESS_LIMIT) {
    throw new FileRefusedError(
      "address_out_of_range",
      `${bytes.length} bytes from that base address do not fit below ${formatAddress(ADDRESS_LIMIT - 1)}. Check the address.`,
    );
  }
  return {
    container: "binary",
    segments: [{ address: baseAddress, bytes: bytes.slice() }],
    startAddress: null,
    header: null,
    notes: [],
  };
}
