import { FileRefusedError } from "@/lib/errors";

/** Bytes of a block's head: id, reserved, length, number of links. */
const HEAD_BYTES = 24;
/** Names, units and formulas are short; a longer text is cut here. */
const LONGEST_TEXT_BYTES = 4096;
const TWO_32 = 4_294_967_296;

/** The bytes of an MDF file with a view on them; `seen` holds blocks that may stand in one list only. */
export interface MdfFile {
  bytes: Uint8Array;
  view: DataView;
  seen: Set<number>;
  /** Address of the block nearest to the end that was read. */
  furthest: number;
  /** Links that may still be read: every one takes eight bytes, and no block is read more than a few times. */
  linksLeft: number;
  /** Address of a data block whose length was never written: it runs to the end of the file. 0 = none. */
  openBlockAt: number;
}

/** One block: its links, and where its own data lie in the file. */
export interface MdfBlock {
  id: string;
  at: number;
  readonly links: number[];
  dataAt: number;
  dataEnd: number;
}

/** Refuses a file whose structure contradicts itself; `what` is a sentence without its end. */
export function refuseDamaged(what: string): never {
  throw new FileRefusedError(
    "file_damaged",
    `${what}, so this MDF file is damaged or was cut off. Copy it from the logger again.`,
  );
}

/** Opens the bytes of a file for reading blocks. */
export function openMdf(bytes: Uint8Array): MdfFile {
  return {
    bytes,
    view: new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength),
    seen: new Set(),
    furthest: 0,
    linksLeft: bytes.length >> 1,
    openBlockAt: 0,
  };
}

/** Unsigned 64-bit number as a double: exact up to 2^53, more than any file has bytes. */
export function readU64(view: DataView, at: number): number {
  return view.getUint32(at, true) + TWO_32 * view.getUint32(at + 4, true);
}

export function readId(file: MdfFile, at: number): string {
  return String.fromCharCode(...file.bytes.subarray(at, at + 4));
}

function demandInside(file: MdfFile, at: number, length: number, what: string): void {
  const size = file.bytes.length;
  if (!(at >= 64 && at + length <= size))
    refuseDamaged(`${what} at byte ${at} points past the end of the file (${size} bytes)`);
}

/**
 * Reads the block at `at`. Its id must be one of `ids` (without the two number signs) and all of it must lie in the file.
 */
export function readBlock(file: MdfFile, at: number, ids: readonly string[]): MdfBlock {
  demandInside(file, at, HEAD_BYTES, `A link to a ${ids[0]} block`);
  const id = readId(file, at);
  if (!ids.some((known) => id === `##${known}`)) {
    refuseDamaged(
      `The link to byte ${at} should lead to a block of type ${ids.join(" or ")}, which is not there`,
    );
  }
  const length = at === file.openBlockAt ? file.bytes.length - at : readU64(file.view, at + 8);
  const count = readU64(file.view, at + 16);
  if (length < HEAD_BYTES + 8 * count)
    refuseDamaged(`The ${id.slice(2)} block at byte ${at} is shorter than its links`);
  demandInside(file, at, length, `The ${id.slice(2)} block`);
  file.furthest = Math.max(file.furthest, at);
  if (file.openBlockAt > 0 && at > file.openBlockAt)
    refuseDamaged(
      `The data block at byte ${file.openBlockAt} was never finished and a ${id.slice(2)} block follows it`,
    );
  let links: number[] | null = null;
  return {
    id: id.slice(2),
    at,
    get links() {
      links ??= readLinks(file, at, count);
      return links;
    },
    dataAt: at + HEAD_BYTES + 8 * count,
    dataEnd: at + length,
  };
}

/** Blocks that overlap may claim the same bytes again and again as links; together they get no more than the file can hold. */
function readLinks(file: MdfFile, at: number, count: number): number[] {
  file.linksLeft -= count;
  if (file.linksLeft < 0) refuseDamaged("The blocks state more links than the file has room for");
  return Array.from({ length: count }, (_, i) => readU64(file.view, at + HEAD_BYTES + 8 * i));
}

/** Reads a block that may be reached once only: a second way to it is a loop. */
export function readListed(file: MdfFile, at: number, ids: readonly string[]): MdfBlock {
  if (file.seen.has(at)) refuseDamaged(`The links lead to byte ${at} a second time, in a loop`);
  file.seen.add(at);
  return readBlock(file, at, ids);
}

/** Refuses a block whose data are shorter than its type needs. */
export function demandData(block: MdfBlock, bytes: number): void {
  if (block.dataEnd - block.dataAt < bytes)
    refuseDamaged(`The ${block.id} block at byte ${block.at} is too short`);
}

const ENTITIES: Readonly<Record<string, string>> = { amp: "&", lt: "<", gt: ">", quot: '"', apos: "'" };

/** Text of a TX block, or of the TX element of an MD block; null for no link or an empty text. */
export function readText(file: MdfFile, at: number | undefined): string | null {
  if (!at) return null;
  const block = readBlock(file, at, ["TX", "MD"]);
  const end = Math.min(block.dataEnd, block.dataAt + LONGEST_TEXT_BYTES);
  const zero = file.bytes.subarray(block.dataAt, end).indexOf(0);
  const raw = file.bytes.subarray(block.dataAt, zero < 0 ? end : block.dataAt + zero);
  let text = new TextDecoder("utf-8").decode(raw);
  if (block.id === "MD") {
    const inner = /<TX[^>]*>([^<]*)<\/TX>/.exec(text)?.[1] ?? "";
    text = inner.replace(/&(amp|lt|gt|quot|apos);/g, (_, name: string) => ENTITIES[name]);
  }
  return text.trim() === "" ? null : text.trim();
}
