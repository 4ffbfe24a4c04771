/** A cyclic redundancy check as the published catalogues parameterise it; numbers are unsigned, the polynomial without its top bit. */
export interface CrcParameters {
  polynomial: number;
  initial: number;
  reflectIn: boolean;
  reflectOut: boolean;
  finalXor: number;
}

/** CRC-32/ISO-HDLC, the one of zlib, Ethernet and PNG. */
export const CRC32_DEFAULT: Readonly<CrcParameters> = {
  polynomial: 0x04c11db7,
  initial: 0xffffffff,
  reflectIn: true,
  reflectOut: true,
  finalXor: 0xffffffff,
};

/** CRC-16/IBM-3740, known as CCITT-FALSE. */
export const CRC16_DEFAULT: Readonly<CrcParameters> = {
  polynomial: 0x1021,
  initial: 0xffff,
  reflectIn: false,
  reflectOut: false,
  finalXor: 0,
};

/**
 * CRC of `pieces`, taken as one run of bytes, by one table of 256 words. Model and names of the parameters: Williams, "A Painless
 * Guide to CRC Error Detection Algorithms" (from memory). An empty run gives what `initial` and `finalXor` alone give.
 */
export function crcOf(pieces: readonly Uint8Array[], width: 16 | 32, parameters: CrcParameters): number {
  const { polynomial, initial, reflectIn, reflectOut, finalXor } = parameters;
  const table = tableOf(polynomial, width, reflectIn);
  let crc = reflectIn ? reflected(initial, width) : initial >>> 0;
  for (const piece of pieces)
    crc = reflectIn ? shiftedRight(piece, table, crc) : shiftedLeft(piece, table, crc, width);
  if (reflectIn !== reflectOut) crc = reflected(crc, width);
  const mask = width === 32 ? 0xffffffff : 0xffff;
  return ((crc ^ finalXor) & mask) >>> 0;
}

function shiftedRight(bytes: Uint8Array, table: Uint32Array, start: number): number {
  let crc = start;
  for (let i = 0; i < bytes.length; i++) crc = table[(crc ^ bytes[i]) & 0xff] ^ (crc >>> 8);
  return crc >>> 0;
}

function shiftedLeft(bytes: Uint8Array, table: Uint32Array, start: number, width: 16 | 32): number {
  const top = width - 8;
  let crc = start;
  for (let i = 0; i < bytes.length; i++) crc = table[((crc >>> top) ^ bytes[i]) & 0xff] ^ (crc << 8);
  return width === 32 ? crc >>> 0 : crc & 0xffff;
}

function tableOf(polynomial: number, width: 16 | 32, isReflected: boolean): Uint32Array {
  const turned = reflected(polynomial, width);
  const top = 2 ** (width - 1);
  return Uint32Array.from({ length: 256 }, (_, byte) => {
    let word = isReflected ? byte : byte << (width - 8);
    for (let bit = 0; bit < 8; bit++) {
      if (isReflected) word = word & 1 ? (word >>> 1) ^ turned : word >>> 1;
      else word = word & top ? (word << 1) ^ polynomial : word << 1;
    }
    return word;
  });
}

/** The low `width` bits in reverse order. */
function reflected(value: number, width: 16 | 32): number {
  let out = 0;
  for (let bit = 0; bit < width; bit++) out = (out << 1) | ((value >>> bit) & 1);
  return out >>> 0;
}
