import { readFileSync } from "node:fs";
import { gunzipSync } from "node:zlib";
import { valuesFileSeeds } from "@/tests/fuzz/values-file-seeds";
import { hexRecord, sRecord } from "@/tests/support/record-files";

export const CALIBRATION_READERS = ["description", "intel-hex", "s-record", "values-file"] as const;
export type CalibrationReader = (typeof CALIBRATION_READERS)[number];

const golden = (name: string) =>
  new Uint8Array(gunzipSync(readFileSync(new URL(`../golden/${name}.gz`, import.meta.url))));
const text = (value: string) => new TextEncoder().encode(value);

/** A small description with every kind of block that the reader knows. */
const SMALL = `ASAP2_VERSION 1 71
/begin PROJECT P "p" /begin HEADER "h" VERSION "1" /end HEADER
/begin MODULE M "m"
/begin A2ML block "IF_DATA" taggedunion { "X" uint; }; /end A2ML
/begin MOD_COMMON "" BYTE_ORDER MSB_LAST ALIGNMENT_LONG 4 /end MOD_COMMON
/begin MOD_PAR "" EPK "one" ADDR_EPK 0x10 /begin MEMORY_SEGMENT S "" DATA FLASH INTERN 0x0 0x100 -1 -1 -1 -1 -1 /end MEMORY_SEGMENT /end MOD_PAR
/begin CHARACTERISTIC a "Übergang" VALUE 0x8000 L 0 C 0 255 BIT_MASK 0xF0 /begin IF_DATA X 1 /end IF_DATA /end CHARACTERISTIC
/begin CHARACTERISTIC b.c[0] "map" MAP 0x9000 L 0 NO_COMPU_METHOD -1.5e3 1E3 MATRIX_DIM 3 4 1
  /begin AXIS_DESCR FIX_AXIS q C 6 0 9 FIX_AXIS_PAR 0 2 6 /end AXIS_DESCR
  /begin AXIS_DESCR COM_AXIS q C 6 0 9 AXIS_PTS_REF x /end AXIS_DESCR /end CHARACTERISTIC
/begin AXIS_PTS x "" 0x9100 q L 0 C 16 0 100 /end AXIS_PTS
/begin RECORD_LAYOUT L NO_AXIS_PTS_X 1 UBYTE AXIS_PTS_X 2 UBYTE INDEX_INCR DIRECT FNC_VALUES 3 SWORD COLUMN_DIR DIRECT /end RECORD_LAYOUT
/begin COMPU_METHOD C "" TAB_INTP "%4.1" "°C" COMPU_TAB_REF T /end COMPU_METHOD
/begin COMPU_TAB T "" TAB_INTP 2 0 -40 255 215 DEFAULT_VALUE_NUMERIC 0 /end COMPU_TAB
/begin COMPU_VTAB_RANGE R "" 1 0 9 "low" /end COMPU_VTAB_RANGE
/begin MEASUREMENT q "" UWORD C 0 0 0 100 ECU_ADDRESS 0x1 /end MEASUREMENT
/begin FUNCTION F "" /begin DEF_CHARACTERISTIC a /end DEF_CHARACTERISTIC /begin SUB_FUNCTION F /end SUB_FUNCTION /end FUNCTION
/begin GROUP G "" ROOT /begin SUB_GROUP G /end SUB_GROUP /end GROUP
/include "part.a2l" // one line
/* more */ /end MODULE /end PROJECT
`;

/** A part of the real description: so many of its lines, in a module of their own. */
function pieceOf(description: Uint8Array, from: number, count: number): Uint8Array {
  const lines = new TextDecoder()
    .decode(description)
    .split("\n")
    .slice(from, from + count);
  return text(`/begin PROJECT P ""\n/begin MODULE M ""\n${lines.join("\n")}\n/end MODULE\n/end PROJECT\n`);
}

function hexFile(base: number, end: string): Uint8Array {
  const bank = Math.floor(base / 65536);
  const rows = Array.from({ length: 12 }, (_, i) =>
    hexRecord(
      0,
      (base + 16 * i) % 65536,
      Array.from({ length: 16 }, (_, k) => (i * 37 + k * 11) & 255),
    ),
  );
  return text(
    [hexRecord(4, 0, [bank >> 8, bank & 255]), ...rows, hexRecord(5, 0, [0, 0, 1, 0]), ":00000001FF"].join(
      end,
    ),
  );
}

/** `types`: header, data, count and end records; null where a file has none. */
function sFile(types: [number | null, 1 | 2 | 3, number | null, number | null], base: number): Uint8Array {
  const [header, data, count, end] = types;
  const rows = Array.from({ length: 9 }, (_, i) =>
    sRecord(
      data,
      base + 12 * i,
      Array.from({ length: 12 }, (_, k) => (i * 53 + k * 7) & 255),
    ),
  );
  const lines = [header === null ? [] : [sRecord(0, 0, [72, 68, 82])], rows];
  if (count !== null) lines.push([sRecord(count, rows.length, [])]);
  if (end !== null) lines.push([sRecord(end, base, [])]);
  return text(`${lines.flat().join("\r\n")}\r\n`);
}

/** Sound files of each kind, from which changes start. */
export function calibrationSeeds(reader: CalibrationReader): Uint8Array[] {
  switch (reader) {
    case "description": {
      const demo = golden("descriptions/ASAP2_Demo_V171.a2l");
      return [text(SMALL), text(SMALL), pieceOf(demo, 3165, 60), pieceOf(demo, 4096, 120)];
    }
    case "intel-hex":
      return [hexFile(0x810000, "\n"), hexFile(0xffff0000, "\r\n"), golden("images/bincopy_in.hex")];
    case "s-record":
      return [
        sFile([0, 1, 5, 9], 0x1000),
        sFile([0, 2, 5, 8], 0x810000),
        sFile([0, 3, 5, 7], 0x80000000),
        sFile([0, 3, null, 7], 0x80000000),
        sFile([0, 1, null, 9], 0x1000),
        golden("images/bincopy_in.s19"),
      ];
    case "values-file":
      return valuesFileSeeds();
  }
}
