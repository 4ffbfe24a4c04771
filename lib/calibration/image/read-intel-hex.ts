import { forEachRecordLine, hexByte, hexRun, refuseLine } from "@/lib/calibration/image/record-bytes";
import { SegmentBuilder } from "@/lib/calibration/image/segment-builder";
import { type CalibrationImage, formatAddress, type ImageNote } from "@/lib/calibration/image/types";
import { FileRefusedError } from "@/lib/errors";

const COLON = 58;
/** Digits of a record without data: colon, length, address, type, checksum. */
const FRAME = 11;
const OFFSET_LIMIT = 0x10000;
/** Data bytes that a record of each type but 00 must carry. */
const FIXED_LENGTH = [0, 0, 2, 4, 2, 4];

/**
 * Reads an Intel HEX file (record types 00 to 05). Bases are multiplied, never shifted, so addresses from 0x80000000 on
 * are right. Refuses with line and reason whatever leaves the image in doubt: checksum, unknown type, no end record,
 * data after the end, differing overlap, and data across 0xFFFF where tools disagree on wrapping.
 */
export function readIntelHex(bytes: Uint8Array): CalibrationImage {
  const builder = new SegmentBuilder();
  const notes: ImageNote[] = [];
  const starts = new Map<number, number>();
  let base = 0;
  let baseType: "none" | "segment" | "linear" = "none";
  let ended = false;
  let runsOn = false;
  let lastLine = 0;

  forEachRecordLine(bytes, ({ line, from, to }) => {
    if (ended)
      refuseLine("data_after_end", line, "something follows the end record, so the image is in doubt.");
    lastLine = line;
    if (bytes[from] !== COLON)
      refuseLine("line_not_a_record", line, "this is no Intel HEX record (it does not begin with a colon).");
    if (to - from < FRAME) refuseLine("record_cut_off", line, "the record is cut off.");
    const length = hexByte(bytes, from + 1, line);
    if (to - from !== FRAME + 2 * length) {
      const code = to - from < FRAME + 2 * length ? "record_cut_off" : "record_length_wrong";
      refuseLine(code, line, `the record states ${length} data bytes and has ${(to - from - FRAME) / 2}.`);
    }
    const high = hexByte(bytes, from + 3, line);
    const low = hexByte(bytes, from + 5, line);
    const type = hexByte(bytes, from + 7, line);
    let sum = length + high + low + type;
    const offset = high * 256 + low;
    if (type === 0) {
      if (offset + length > OFFSET_LIMIT) {
        if (baseType !== "linear") {
          refuseLine(
            "address_wraps",
            line,
            "the data cross offset 0xFFFF without a linear base; tools disagree whether they wrap or run on.",
          );
        }
        runsOn = true;
      }
      if (length > 0) {
        const at = builder.reserve(base + offset, length, line);
        sum += hexRun(bytes, from + 9, line, builder.data, at, length);
      }
    } else {
      if (type > 5) refuseLine("record_type_unknown", line, `record type ${type} is not known.`);
      if (length !== FIXED_LENGTH[type])
        refuseLine(
          "record_length_wrong",
          line,
          `a record of type 0${type} must have ${FIXED_LENGTH[type]} data bytes, not ${length}.`,
        );
      if (offset !== 0 && (type === 2 || type === 4))
        refuseLine("record_offset_wrong", line, `a record of type 0${type} has an offset, which must be 0.`);
      let value = 0;
      for (let i = 0; i < length; i++) {
        const byte = hexByte(bytes, from + 9 + 2 * i, line);
        sum += byte;
        value = value * 256 + byte;
      }
      if (type === 1) ended = true;
      else if (type === 2) [base, baseType] = [value * 16, "segment"];
      else if (type === 4) [base, baseType] = [value * 65536, "linear"];
      else starts.set(type, value);
    }
    const stated = hexByte(bytes, to - 2, line);
    if (((sum + stated) & 0xff) !== 0)
      refuseLine(
        "checksum_wrong",
        line,
        "the checksum does not fit the record. The file is damaged; export the image again.",
      );
  });

  if (!ended) {
    const until = builder.count === 0 ? "" : ` The data so far end at ${formatAddress(builder.lastEnd - 1)}.`;
    throw new FileRefusedError(
      "no_end_record",
      `The file has no end record after line ${lastLine}, so it may be cut off.${until} Export the image again.`,
      { line: lastLine },
    );
  }
  if (builder.count === 0) throw new FileRefusedError("no_data", "The file holds no data record.");
  if (runsOn)
    notes.push({
      code: "data_cross_bank",
      message: "A record crosses offset 0xFFFF; its data run on into the next 64 KiB.",
    });
  if (starts.size > 1)
    notes.push({
      code: "two_start_addresses",
      message: "The file states a segmented and a linear start address.",
    });
  const segments = builder.build(notes);
  const segmented = starts.get(3);
  const startAddress =
    starts.get(5) ??
    (segmented === undefined ? null : Math.floor(segmented / 65536) * 16 + (segmented % 65536));
  return { container: "intel-hex", segments, startAddress, header: null, notes };
}
