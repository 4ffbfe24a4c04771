import { inflateSync } from "node:zlib";
import { FileRefusedError } from "@/lib/errors";
import {
  demandData,
  type MdfBlock,
  type MdfFile,
  readBlock,
  readId,
  readListed,
  readU64,
  refuseDamaged,
} from "@/lib/logs/mdf/mdf-blocks";

/** What unpacking may still claim, bytes, over the whole file. */
export interface InflateBudget {
  left: number;
  /** The whole of it, for the message. */
  limit: number;
}

/** Deflate packs a byte into no less than this share of a byte (RFC 1951: 258 bytes in two bits). */
const STRONGEST_DEFLATE = 1032;
const ZIP_NAMES = [
  "deflate",
  "transposed deflate",
  "Zstandard",
  "transposed Zstandard",
  "LZ4",
  "transposed LZ4",
];

interface Piece {
  block: MdfBlock;
  /** Bytes when unpacked. */
  length: number;
}

function pieceOf(file: MdfFile, at: number, kind: string, budget: InflateBudget): Piece {
  const block = readListed(file, at, [kind, "DZ"]);
  if (block.id !== "DZ") return { block, length: block.dataEnd - block.dataAt };
  demandData(block, 24);
  const d = block.dataAt;
  const original = String.fromCharCode(file.bytes[d], file.bytes[d + 1]);
  const zip = file.view.getUint8(d + 2);
  if (original !== kind)
    refuseDamaged(
      `The packed block at byte ${at} holds a block of type ${original} where ${kind} is expected`,
    );
  if (zip > 1) {
    throw new FileRefusedError(
      "format_not_supported",
      `The data of this MDF file are packed with ${ZIP_NAMES[zip] ?? `method ${zip}`}, which is not read. Save it without packing or with deflate.`,
    );
  }
  const length = readU64(file.view, d + 8);
  const packed = readU64(file.view, d + 16);
  if (d + 24 + packed > block.dataEnd)
    refuseDamaged(`The packed block at byte ${at} is longer than the block around it`);
  if (length > budget.left) {
    throw new FileRefusedError(
      "inflates_too_large",
      `The packed data of this MDF file grow beyond ${Math.floor(budget.limit / 1024 / 1024)} MB. Split the recording and upload the parts.`,
    );
  }
  if (length > STRONGEST_DEFLATE * packed + 64)
    refuseDamaged(
      `The packed block at byte ${at} says it holds ${length} bytes, which ${packed} packed ones can't`,
    );
  budget.left -= length;
  return { block, length };
}

/** All pieces behind a data link, in order: one block, or lists of them. */
function piecesOf(file: MdfFile, link: number, kind: string, budget: InflateBudget): Piece[] {
  if (link === 0) return [];
  const id = readId(file, link);
  if (["##DV", "##DI", "##LD"].includes(id)) {
    throw new FileRefusedError(
      "format_not_supported",
      `This MDF file stores its values by column (${id.slice(2)} blocks), which is not read. Save it in record order.`,
    );
  }
  if (id !== "##HL" && id !== "##DL") return [pieceOf(file, link, kind, budget)];
  let at = id === "##HL" ? (readListed(file, link, ["HL"]).links[0] ?? 0) : link;
  const pieces: Piece[] = [];
  while (at !== 0) {
    const list = readListed(file, at, ["DL"]);
    for (const data of list.links.slice(1)) if (data !== 0) pieces.push(pieceOf(file, data, kind, budget));
    at = list.links[0] ?? 0;
  }
  return pieces;
}

/** Undoes the transposition: whole rows of `width` bytes were written column by column, the rest follows as it is. */
function transposeBack(packed: Uint8Array, width: number): Uint8Array {
  const rows = width > 0 ? Math.floor(packed.length / width) : 0;
  if (rows < 2 || width < 2) return packed;
  const out = new Uint8Array(packed.length);
  for (let c = 0, from = 0; c < width; c++) {
    for (let r = 0, to = c; r < rows; r++, to += width) out[to] = packed[from++];
  }
  out.set(packed.subarray(rows * width), rows * width);
  return out;
}

function unpacked(file: MdfFile, { block, length }: Piece): Uint8Array {
  const d = block.dataAt;
  if (block.id !== "DZ") return file.bytes.subarray(d, d + length);
  const packed = file.bytes.subarray(d + 24, d + 24 + readU64(file.view, d + 16));
  let plain: Uint8Array;
  try {
    const chunkSize = Math.max(64, Math.min(length + 64, 1 << 20));
    plain = length === 0 ? new Uint8Array() : inflateSync(packed, { maxOutputLength: length, chunkSize });
  } catch {
    refuseDamaged(`The packed block at byte ${block.at} can't be unpacked to the ${length} bytes it states`);
  }
  if (plain.length !== length)
    refuseDamaged(
      `The packed block at byte ${block.at} unpacks to ${plain.length} bytes where it states ${length}`,
    );
  return file.view.getUint8(d + 2) === 1 ? transposeBack(plain, file.view.getUint32(d + 4, true)) : plain;
}

/**
 * The bytes behind a data link as one stream: DT or SD, alone, packed (DZ) or in lists (DL, HL). One plain block is not copied.
 * Packed bytes are held against `budget` before they are unpacked. Throws FileRefusedError.
 */
export function readStream(
  file: MdfFile,
  link: number,
  kind: "DT" | "SD",
  budget: InflateBudget,
): Uint8Array {
  const pieces = piecesOf(file, link, kind, budget);
  if (pieces.length === 1) return unpacked(file, pieces[0]);
  const stream = new Uint8Array(pieces.reduce((sum, piece) => sum + piece.length, 0));
  let at = 0;
  for (const piece of pieces) {
    stream.set(unpacked(file, piece), at);
    at += piece.length;
  }
  return stream;
}

/** Address of the last plain data block that the link leads to, or 0: the one whose length an unfinished file may lack. */
export function lastPlainBlock(file: MdfFile, link: number): number {
  if (link === 0) return 0;
  const id = readId(file, link);
  if (id === "##DT") return link;
  let last = 0;
  const passed = new Set<number>();
  for (
    let at = id === "##HL" ? (readBlock(file, link, ["HL"]).links[0] ?? 0) : id === "##DL" ? link : 0;
    at !== 0;
  ) {
    if (passed.has(at)) refuseDamaged(`The links lead to byte ${at} a second time, in a loop`);
    passed.add(at);
    const list = readBlock(file, at, ["DL"]);
    for (const data of list.links.slice(1))
      if (data !== 0 && readId(file, data) === "##DT") last = Math.max(last, data);
    at = list.links[0] ?? 0;
  }
  return last;
}
