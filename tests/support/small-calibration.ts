/** A small description of our own and images that it describes; invented for tests of the services, not for those of the readers. */

const BASE = 0x8000;
const LENGTH = 64;

/** Places in the image; words are unsigned 16 bit, low byte first. */
export const AT = { limit: 0x8000, gain: 0x8002, axis: 0x8010, curve: 0x8018, epk: 0x8030, spare: 0x803c };
const EPK = "TEST01";

/** The rpm axis of the curve, raw = 1/min. */
const AXIS = [1000, 2000, 4000, 6000];

/** An image: raw words by name, and bytes that nobody described. */
export interface SmallImage {
  limit?: number;
  gain?: number;
  curve?: number[];
  spare?: number;
}

/** The bytes of an image at 0x8000. */
export function smallBytes({
  limit = 6600,
  gain = 100,
  curve = [10, 20, 30, 40],
  spare = 0,
}: SmallImage = {}): Buffer {
  const bytes = Buffer.alloc(LENGTH, 0xff);
  const put = (address: number, word: number) => bytes.writeUInt16LE(word, address - BASE);
  put(AT.limit, limit);
  put(AT.gain, gain);
  for (const [i, rpm] of AXIS.entries()) put(AT.axis + 2 * i, rpm);
  for (const [i, value] of curve.entries()) put(AT.curve + 2 * i, value);
  bytes.write(EPK, AT.epk - BASE, "latin1");
  bytes[AT.spare - BASE] = spare;
  return bytes;
}

/** The same as Intel HEX. */
export function smallHex(values: SmallImage = {}): Buffer {
  const bytes = smallBytes(values);
  const lines: string[] = [];
  for (let at = 0; at < bytes.length; at += 16) {
    const record = Buffer.concat([
      Buffer.from([16, (BASE + at) >> 8, (BASE + at) & 0xff, 0]),
      bytes.subarray(at, at + 16),
    ]);
    const checksum = -record.reduce((sum, byte) => sum + byte, 0) & 0xff;
    lines.push(`:${record.toString("hex")}${checksum.toString(16).padStart(2, "0")}`);
  }
  return Buffer.from(`${lines.join("\n")}\n:00000001FF\n`.toUpperCase());
}

const hex = (address: number) => `0x${address.toString(16)}`;

/** The description as ASAP2 1.71. `unit` changes its text and nothing that is read as a number. */
export function smallA2l({ unit = "deg" } = {}): Buffer {
  return Buffer.from(`ASAP2_VERSION 1 71
/begin PROJECT Small "a test's own"
/begin MODULE Ecu ""
/begin MOD_PAR "" ADDR_EPK ${hex(AT.epk)} EPK "${EPK}" /end MOD_PAR
/begin MOD_COMMON "" BYTE_ORDER MSB_LAST /end MOD_COMMON
/begin COMPU_METHOD one "" LINEAR "%6.0" "1/min" COEFFS_LINEAR 1 0 /end COMPU_METHOD
/begin COMPU_METHOD tenth "" LINEAR "%6.1" "${unit}" COEFFS_LINEAR 0.1 0 /end COMPU_METHOD
/begin RECORD_LAYOUT word FNC_VALUES 1 UWORD COLUMN_DIR DIRECT /end RECORD_LAYOUT
/begin RECORD_LAYOUT points AXIS_PTS_X 1 UWORD INDEX_INCR DIRECT /end RECORD_LAYOUT
/begin MEASUREMENT engine_speed "" UWORD one 0 0 0 8000 /end MEASUREMENT
/begin AXIS_PTS rpm_axis "speed points" ${hex(AT.axis)} engine_speed points 0 one 4 0 8000 /end AXIS_PTS
/begin CHARACTERISTIC rpm_limit "hard limiter" VALUE ${hex(AT.limit)} word 0 one 0 8000 /end CHARACTERISTIC
/begin CHARACTERISTIC gain "" VALUE ${hex(AT.gain)} word 0 tenth 0 1000 /end CHARACTERISTIC
/begin CHARACTERISTIC advance "base advance" CURVE ${hex(AT.curve)} word 0 tenth 0 60
  /begin AXIS_DESCR COM_AXIS engine_speed one 4 0 8000 AXIS_PTS_REF rpm_axis /end AXIS_DESCR
/end CHARACTERISTIC
/begin FUNCTION limiter "" /begin DEF_CHARACTERISTIC rpm_limit /end DEF_CHARACTERISTIC /end FUNCTION
/begin FUNCTION ignition "" /begin DEF_CHARACTERISTIC advance gain /end DEF_CHARACTERISTIC /end FUNCTION
/end MODULE
/end PROJECT
`);
}
