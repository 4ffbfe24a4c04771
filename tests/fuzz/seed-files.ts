import { goldenLog } from "@/tests/support/golden-log";
import { type WrittenChannel, type WrittenData, writeMdf } from "@/tests/support/mdf-writer";

export const READERS = ["delimited", "mdf", "nmea", "gpx", "gzip"] as const;
export type LogReader = (typeof READERS)[number];

const start = (name: string, bytes: number) => goldenLog(name).slice(0, bytes);
const DIALECTS = [
  "d01_comma_bracket_units",
  "d02_semicolon_decimal_comma_crlf",
  "d03_unit_row_bom",
  "d04_utf16_tab",
  "d05_latin1_german",
  "d07_bar_clock_midnight",
  "d08_epoch_ms_out_of_order",
  "d10_comments_truncated",
  "d11_iso_time_mps_shuffled",
  "d12_snake_blank_repeat_header",
].map((name) => `dialects/${name}.csv`);

/** A small file with every kind of block that the reader knows. */
function mdfOf(
  form: WrittenData["form"],
  options: { idBytes?: number; unfinished?: number } = {},
): Uint8Array {
  const { idBytes = 0 } = options;
  const channels: WrittenChannel[] = [
    { name: "t", unit: "s", type: 2, sync: 1, dataType: 4, byteOffset: 0, bitCount: 64 },
    {
      name: "GPS speed",
      unit: "km/h",
      dataType: 0,
      byteOffset: 8,
      bitCount: 16,
      conversion: { type: 1, values: [0, 0.1] },
    },
    { name: "bits", dataType: 3, byteOffset: 10, bitOffset: 3, bitCount: 11, flags: 2, invalidationBit: 1 },
    {
      name: "half",
      dataType: 4,
      byteOffset: 12,
      bitCount: 16,
      conversion: { type: 3, refs: ["2*X+abs(X)"] },
    },
    {
      name: "gear",
      dataType: 0,
      byteOffset: 14,
      bitCount: 8,
      conversion: { type: 7, values: [1, 2], refs: ["one", "two", null] },
    },
    {
      name: "table",
      dataType: 0,
      byteOffset: 14,
      bitCount: 8,
      conversion: { type: 4, values: [0, 1, 255, 9] },
    },
    {
      name: "range",
      dataType: 0,
      byteOffset: 14,
      bitCount: 8,
      conversion: { type: 8, values: [5, 9], refs: ["low", { type: 1, values: [0, 2] }] },
    },
    {
      name: "word",
      type: 1,
      dataType: 7,
      byteOffset: 16,
      bitCount: 64,
      texts: { stream: new Uint8Array([2, 0, 0, 0, 79, 75]) },
    },
    { name: "map", dataType: 0, byteOffset: 14, bitCount: 8, composition: "array" },
  ];
  const rows = 40;
  const size = idBytes + 25;
  const stream = new Uint8Array(rows * size).map((_, i) => (i * 37) & 255);
  const view = new DataView(stream.buffer);
  for (let i = 0; i < rows; i++) {
    if (idBytes > 0) view.setUint8(i * size, 1);
    view.setFloat64(i * size + idBytes, i / 50, true);
    view.setBigUint64(i * size + idBytes + 16, 0n, true);
  }
  const groups = [{ recordId: 1, channels, dataBytes: 24, invalidationBytes: 1, cycles: rows }];
  return writeMdf([{ idBytes, groups, stream, form, blockBytes: 300 }], options);
}

const text = (value: string) => new TextEncoder().encode(value);

/** Sound files of each format, from which mutations start; those of "gzip" are packed before or after they are changed. */
export function seedFiles(reader: LogReader): Uint8Array[] {
  switch (reader) {
    case "delimited":
      return DIALECTS.map((name) => start(name, 6000));
    case "mdf":
      return [
        mdfOf("plain"),
        mdfOf("list"),
        mdfOf("deflate"),
        mdfOf("transposed"),
        mdfOf("header-list"),
        mdfOf("plain", { idBytes: 1 }),
        mdfOf("plain", { unfinished: 1 }),
        goldenLog("mdf/made_dz1_transposed.mf4"),
      ];
    case "nmea":
      return ["telit-he910", "ublox-8", "sirfstarv-nmea"].map((name) => start(`nmea/${name}.log`, 8000));
    case "gpx":
      return [
        start("gpx/around-visnjan-with-car.gpx", 6000),
        goldenLog("gpx/track_with_speed.gpx"),
        text(
          `<gpx>${'<trk><trkseg><trkpt lat="1" lon="2"><time>2030-01-01T00:00:00Z</time></trkpt></trkseg></trk>'.repeat(9)}</gpx>`,
        ),
      ];
    case "gzip":
      return [
        start("dialects/d01_comma_bracket_units.csv", 3000),
        mdfOf("plain"),
        start("nmea/telit-he910.log", 3000),
      ];
  }
}
