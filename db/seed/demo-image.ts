import { randomStream } from "@/lib/signal/random";

const BASE = 0x80_0000;
const LENGTH = 0x8000;

/** One change of an image: bytes written from an address on. */
export interface Patch {
  at: number;
  bytes: number[];
}

/** Invented content of an invented control unit: pseudo-random bytes, the same each time. */
function content(patches: readonly Patch[]): Buffer {
  const random = randomStream(20_261_201, 3);
  const bytes = Buffer.from(Array.from({ length: LENGTH }, () => Math.floor(random.nextUniform() * 256)));
  for (const patch of patches) Buffer.from(patch.bytes).copy(bytes, patch.at - BASE);
  return bytes;
}

function record(type: number, address: number, data: Buffer): string {
  const body = Buffer.concat([Buffer.from([data.length, (address >> 8) & 0xff, address & 0xff, type]), data]);
  const checksum = (0x100 - (body.reduce((sum, byte) => sum + byte, 0) & 0xff)) & 0xff;
  return `:${body.toString("hex")}${checksum.toString(16).padStart(2, "0")}`.toUpperCase();
}

/** An image of the demo as Intel HEX (32-bit linear addresses, 32 bytes a record). */
export function demoImage(patches: readonly Patch[]): Buffer {
  const bytes = content(patches);
  const lines = [record(4, 0, Buffer.from([BASE >> 24, (BASE >> 16) & 0xff]))];
  for (let at = 0; at < bytes.length; at += 32) lines.push(record(0, at, bytes.subarray(at, at + 32)));
  lines.push(record(1, 0, Buffer.alloc(0)));
  return Buffer.from(`${lines.join("\n")}\n`, "ascii");
}

/** What each revision of the demo's story wrote where, on top of what its parent wrote. */
export const PATCHES = {
  asFound: [],
  midRange: [{ at: BASE + 0x1240, bytes: [0x5a, 0x5c, 0x5f, 0x60, 0x60, 0x5e, 0x5b, 0x58] }],
  topEnd: [{ at: BASE + 0x1a80, bytes: [0x21, 0x20, 0x1e, 0x1c] }],
  ignition: [
    { at: BASE + 0x1240, bytes: [0x58, 0x5a, 0x5c, 0x5d, 0x5d, 0x5c, 0x5a, 0x58] },
    { at: BASE + 0x2c10, bytes: [0x18, 0x17, 0x16, 0x16, 0x16, 0x17] },
  ],
  visitor: [
    { at: BASE + 0x1240, bytes: [0x58, 0x5a, 0x5c, 0x5d, 0x5d, 0x5c, 0x5a, 0x58] },
    { at: BASE + 0x2c10, bytes: [0x18, 0x17, 0x16, 0x16, 0x16, 0x17] },
    { at: BASE + 0x1300, bytes: [0x62, 0x63, 0x63, 0x62] },
  ],
} as const satisfies Record<string, readonly Patch[]>;
