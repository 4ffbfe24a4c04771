import { MEMORY } from "@/db/seed/control-unit/place";
import { type ImageName, imageBytes } from "@/db/seed/control-unit/revisions";

export const DEMO_DESCRIPTION_NAME = "marlin-sample.a2l";
const BANK = 0x1_0000;
const RECORD_BYTES = 32;

function record(type: number, address: number, data: Buffer): string {
  const body = Buffer.concat([Buffer.from([data.length, (address >> 8) & 0xff, address & 0xff, type]), data]);
  const checksum = (0x100 - (body.reduce((sum, byte) => sum + byte, 0) & 0xff)) & 0xff;
  return `:${body.toString("hex")}${checksum.toString(16).padStart(2, "0")}`.toUpperCase();
}

/** An image of the demo as Intel HEX (32-bit linear addresses, 32 bytes a record). The control unit lies in one bank. */
export function demoImage(name: ImageName): Buffer {
  const bytes = imageBytes(name);
  const bank = Math.floor(MEMORY.base / BANK);
  const lines = [record(4, 0, Buffer.from([bank >> 8, bank & 0xff]))];
  for (let at = 0; at < bytes.length; at += RECORD_BYTES)
    lines.push(record(0, at, bytes.subarray(at, at + RECORD_BYTES)));
  lines.push(record(1, 0, Buffer.alloc(0)));
  return Buffer.from(`${lines.join("\n")}\n`, "ascii");
}
