import { forEachRecordLine, hexByte, hexRun, refuseLine } from "@/lib/calibration/image/record-bytes";
import { SegmentBuilder } from "@/lib/calibration/image/segment-builder";
import type { CalibrationImage, ImageNote } from "@/lib/calibration/image/types";
import { FileRefusedError } from "@/lib/errors";

/** Address bytes of record types S0 to S9; 0 = reserved. */
const ADDRESS_BYTES = [2, 2, 3, 4, 0, 2, 3, 4, 3, 2];
const ZERO = 48;

/**
 * Reads a Motorola S-record file (S0 to S3, S5 to S9; upper or lower case). Refuses with line and reason: wrong length,
 * checksum or record count, S4, differing overlap, a line that is no record. A missing header or end record, and data
 * after the end record, are notes.
 */
export function readSRecord(bytes: Uint8Array): CalibrationImage {
  const builder = new SegmentBuilder();
  const notes: ImageNote[] = [];
  const note = (code: string, message: string) => {
    if (!notes.some((n) => n.code === code)) notes.push({ code, message });
  };
  let header: string | null = null;
  let startAddress: number | null = null;
  let ended = false;
  let counted = false;
  let dataRecords = 0;
  let dataType = 0;
  // The checksum does not cover the digit of the type: a damaged one shows only in that records do not go together.
  const doubtType = (line: number) =>
    note(
      "record_types_mixed",
      `The type of the record in line ${line} does not go with the others, and no checksum covers it. Compare the image with its source.`,
    );

  forEachRecordLine(bytes, ({ line, from, to }) => {
    const type = bytes[from + 1] - ZERO;
    if ((bytes[from] !== 83 && bytes[from] !== 115) || !(type >= 0 && type <= 9)) {
      refuseLine("line_not_a_record", line, "this is no S-record (it does not begin with S and a digit).");
    }
    if (to - from < 4) refuseLine("record_cut_off", line, "the record is cut off.");
    const count = hexByte(bytes, from + 2, line);
    if (to - from !== 4 + 2 * count) {
      const code = to - from < 4 + 2 * count ? "record_cut_off" : "record_length_wrong";
      refuseLine(code, line, `the record states ${count} bytes and has ${(to - from - 4) / 2}.`);
    }
    const width = ADDRESS_BYTES[type];
    if (width === 0) refuseLine("record_type_unknown", line, "record type S4 is reserved.");
    const length = count - width - 1;
    if (length < 0)
      refuseLine(
        "record_length_wrong",
        line,
        `a record of type S${type} needs at least ${width + 1} bytes, not ${count}.`,
      );
    let sum = count;
    let address = 0;
    for (let i = 0; i < width; i++) {
      const byte = hexByte(bytes, from + 4 + 2 * i, line);
      sum += byte;
      address = address * 256 + byte;
    }
    const isData = type >= 1 && type <= 3;
    const data = from + 4 + 2 * width;
    let text = "";
    if (isData && length > 0) {
      const at = builder.reserve(address, length, line);
      sum += hexRun(bytes, data, line, builder.data, at, length);
    } else
      for (let i = 0; i < length; i++) {
        const byte = hexByte(bytes, data + 2 * i, line);
        sum += byte;
        if (type === 0 && byte !== 0) text += String.fromCharCode(byte);
      }
    if (((sum + hexByte(bytes, to - 2, line)) & 0xff) !== 0xff) {
      refuseLine(
        "checksum_wrong",
        line,
        "the checksum does not fit the record. The file is damaged; export the image again.",
      );
    }
    if (isData) {
      dataRecords++;
      if (dataType !== 0 && type !== dataType) doubtType(line);
      dataType ||= type;
      if (ended) note("data_after_end", `Data follow the end record, first in line ${line}; they were read.`);
    } else if (type === 0) {
      if (dataRecords > 0) note("header_inside", `A header record stands inside the data, in line ${line}.`);
      else if (header !== null) note("header_repeated", `A second header record stands in line ${line}.`);
      header ??= text;
    } else if (type === 5 || type === 6) {
      if (length > 0)
        refuseLine(
          "record_length_wrong",
          line,
          `a record of type S${type} holds a count of ${width} bytes and nothing else.`,
        );
      counted = true;
      if (address !== dataRecords) {
        refuseLine(
          "record_count_wrong",
          line,
          `the file states ${address} data records and has ${dataRecords} up to here: some are missing or too many.`,
        );
      }
    } else {
      if (length > 0)
        refuseLine("record_length_wrong", line, `a record of type S${type} ends the file and holds no data.`);
      if (dataType !== 0 && type !== 10 - dataType) doubtType(line);
      ended = true;
      startAddress ??= address;
    }
  });

  if (builder.count === 0) throw new FileRefusedError("no_data", "The file holds no data record.");
  if (header === null) note("no_header", "The file has no header record (S0).");
  if (!ended) {
    note(
      "no_end_record",
      counted
        ? "The file has no end record (S7, S8 or S9), but its count of records fits."
        : "The file has no end record (S7, S8 or S9) and no count, so that it was cut off at a line's end can't be ruled out.",
    );
  }
  return { container: "s-record", segments: builder.build(notes), startAddress, header, notes };
}
