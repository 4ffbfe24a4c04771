import { deflateSync } from "node:zlib";

// A small writer of MDF 4 files for tests. The layout follows the public description of the format's blocks; it shares no code
// with the reader. Structure first, data after it, so that an unfinished file ends in its data.

export type WrittenConversion = {
  type: number;
  values?: number[];
  refs?: (string | WrittenConversion | null)[];
};

export interface WrittenChannel {
  name: string;
  unit?: string;
  type?: number;
  sync?: number;
  dataType: number;
  bitOffset?: number;
  byteOffset: number;
  bitCount: number;
  flags?: number;
  invalidationBit?: number;
  conversion?: WrittenConversion;
  /** Members of a structure, or `array`. */
  composition?: WrittenChannel[] | "array";
  /** Values of variable length, or the number of the group of the same data group that holds them. */
  texts?: { stream: Uint8Array } | { group: number };
}

export interface WrittenGroup {
  name?: string;
  recordId?: number;
  flags?: number;
  dataBytes: number;
  invalidationBytes?: number;
  /** Number of records as stated. */
  cycles: number;
  channels: WrittenChannel[];
}

export interface WrittenData {
  idBytes?: number;
  groups: WrittenGroup[];
  /** Records with their ids, as they lie in the file. */
  stream: Uint8Array;
  form?: "plain" | "list" | "deflate" | "transposed" | "header-list";
  /** Bytes a block in the forms that split. */
  blockBytes?: number;
  transposeBytes?: number;
}

const HEAD = 24;

/** Takes blocks one after the other and hands back the address of each. */
export class MdfWriter {
  readonly parts: Uint8Array[] = [];
  size = 0;

  constructor(options: { version?: number; unfinished?: number; custom?: number } = {}) {
    const { version = 410, unfinished, custom = 0 } = options;
    const id = new Uint8Array(64);
    const text = unfinished === undefined ? "MDF     " : "UnFinMF ";
    id.set(new TextEncoder().encode(`${text}${(version / 100).toFixed(2)}    test    `));
    const view = new DataView(id.buffer);
    view.setUint16(28, version, true);
    view.setUint16(60, unfinished ?? 0, true);
    view.setUint16(62, custom, true);
    this.parts.push(id);
    this.size = 64;
  }

  add(
    id: string,
    links: readonly number[],
    data: Uint8Array = new Uint8Array(),
    statedLength?: number,
  ): number {
    const at = this.size;
    const length = HEAD + 8 * links.length + data.length;
    const bytes = new Uint8Array(Math.ceil(length / 8) * 8);
    const view = new DataView(bytes.buffer);
    bytes.set(new TextEncoder().encode(`##${id}`));
    view.setBigUint64(8, BigInt(statedLength ?? length), true);
    view.setBigUint64(16, BigInt(links.length), true);
    for (const [i, link] of links.entries()) view.setBigUint64(HEAD + 8 * i, BigInt(link), true);
    bytes.set(data, HEAD + 8 * links.length);
    this.parts.push(bytes);
    this.size += bytes.length;
    return at;
  }

  link(at: number, index: number, to: number): void {
    let start = 0;
    for (const part of this.parts) {
      if (at === start)
        new DataView(part.buffer, part.byteOffset).setBigUint64(HEAD + 8 * index, BigInt(to), true);
      start += part.length;
    }
  }

  text(value: string | undefined): number {
    return value === undefined ? 0 : this.add("TX", [], new TextEncoder().encode(`${value}\u0000`));
  }

  bytes(): Uint8Array {
    return new Uint8Array(Buffer.concat(this.parts));
  }
}

/** Data section of a block, written by position. */
export function section(size: number, write: (view: DataView) => void): Uint8Array {
  const bytes = new Uint8Array(size);
  write(new DataView(bytes.buffer));
  return bytes;
}

function addConversion(w: MdfWriter, conversion: WrittenConversion | undefined): number {
  if (!conversion) return 0;
  const { type, values = [], refs = [] } = conversion;
  const links = refs.map((ref) =>
    ref === null ? 0 : typeof ref === "string" ? w.text(ref) : addConversion(w, ref),
  );
  const data = section(24 + 8 * values.length, (v) => {
    v.setUint8(0, type);
    v.setUint16(4, refs.length, true);
    v.setUint16(6, values.length, true);
    for (const [i, value] of values.entries()) v.setFloat64(24 + 8 * i, value, true);
  });
  return w.add("CC", [0, 0, 0, 0, ...links], data);
}

function addChannels(w: MdfWriter, channels: readonly WrittenChannel[], groupAt: readonly number[]): number {
  let next = 0;
  for (const c of [...channels].reverse()) {
    const inner =
      c.composition === "array"
        ? w.add("CA", [0], new Uint8Array(16))
        : c.composition
          ? addChannels(w, c.composition, groupAt)
          : 0;
    const values = !c.texts
      ? 0
      : "group" in c.texts
        ? groupAt[c.texts.group]
        : w.add("SD", [], c.texts.stream);
    const data = section(72, (v) => {
      v.setUint8(0, c.type ?? 0);
      v.setUint8(1, c.sync ?? 0);
      v.setUint8(2, c.dataType);
      v.setUint8(3, c.bitOffset ?? 0);
      v.setUint32(4, c.byteOffset, true);
      v.setUint32(8, c.bitCount, true);
      v.setUint32(12, c.flags ?? 0, true);
      v.setUint32(16, c.invalidationBit ?? 0, true);
    });
    next = w.add(
      "CN",
      [next, inner, w.text(c.name), 0, addConversion(w, c.conversion), values, w.text(c.unit), 0],
      data,
    );
  }
  return next;
}

function transpose(bytes: Uint8Array, width: number): Uint8Array {
  const rows = Math.floor(bytes.length / width);
  const out = bytes.slice();
  for (let r = 0; r < rows; r++) for (let c = 0; c < width; c++) out[c * rows + r] = bytes[r * width + c];
  return out;
}

/** A DZ block as it stands in a file; `statedBytes` may lie about its size. */
export function addPacked(
  w: MdfWriter,
  plain: Uint8Array,
  options: { kind?: string; zip?: number; width?: number; statedBytes?: number } = {},
): number {
  const { kind = "DT", zip = 0, width = 0, statedBytes = plain.length } = options;
  const packed = deflateSync(zip === 1 ? transpose(plain, width) : plain);
  const data = section(24 + packed.length, (v) => {
    v.setUint8(0, kind.charCodeAt(0));
    v.setUint8(1, kind.charCodeAt(1));
    v.setUint8(2, zip);
    v.setUint32(4, width, true);
    v.setBigUint64(8, BigInt(statedBytes), true);
    v.setBigUint64(16, BigInt(packed.length), true);
  });
  data.set(packed, 24);
  return w.add("DZ", [], data);
}

function addData(
  w: MdfWriter,
  { stream, form = "plain", blockBytes = 1000, groups, transposeBytes }: WrittenData,
): number {
  if (form === "plain") return w.add("DT", [], stream);
  const width = transposeBytes ?? groups[0].dataBytes + (groups[0].invalidationBytes ?? 0);
  const blocks: number[] = [];
  for (let from = 0; from < stream.length; from += blockBytes) {
    const piece = stream.slice(from, from + blockBytes);
    blocks.push(
      form === "list"
        ? w.add("DT", [], piece)
        : addPacked(w, piece, { zip: form === "transposed" ? 1 : 0, width }),
    );
  }
  // Two lists where there are enough blocks, so that the way from one to the next is read too.
  const half = Math.ceil(blocks.length / 2);
  const list = (part: number[], next: number) =>
    w.add(
      "DL",
      [next, ...part],
      section(8 + 8 * part.length, (v) => v.setUint32(4, part.length, true)),
    );
  const second = blocks.length > 1 ? list(blocks.slice(half), 0) : 0;
  const first = list(blocks.slice(0, half), second);
  return form === "header-list" ? w.add("HL", [first], new Uint8Array(8)) : first;
}

/** Writes a whole file. `settle` may spoil links at the end: it gets the writer and the addresses of the data groups. */
export function writeMdf(
  data: readonly WrittenData[],
  options: { version?: number; unfinished?: number; custom?: number; startNs?: bigint } = {},
  settle: (w: MdfWriter, groupsAt: number[]) => void = () => undefined,
): Uint8Array {
  const w = new MdfWriter(options);
  const head = section(32, (v) => v.setBigUint64(0, options.startNs ?? 0n, true));
  const hd = w.add("HD", [0, 0, 0, 0, 0, 0], head);
  const at = data.map(({ idBytes = 0, groups }) => {
    const groupAt: number[] = groups.map(() => 0);
    let next = 0;
    // From the last group to the first: a channel may point at a later group that holds its texts.
    for (let k = groups.length - 1; k >= 0; k--) {
      const g = groups[k];
      const cn = addChannels(w, g.channels, groupAt);
      const about = section(32, (v) => {
        v.setBigUint64(0, BigInt(g.recordId ?? 0), true);
        v.setBigUint64(8, BigInt(g.cycles), true);
        v.setUint16(16, g.flags ?? 0, true);
        v.setUint32(24, g.dataBytes, true);
        v.setUint32(28, g.invalidationBytes ?? 0, true);
      });
      next = w.add("CG", [next, cn, w.text(g.name), 0, 0, 0], about);
      groupAt[k] = next;
    }
    return w.add(
      "DG",
      [0, next, 0, 0],
      section(8, (v) => v.setUint8(0, idBytes)),
    );
  });
  at.forEach((dg, i) => {
    if (i === 0) w.link(hd, 0, dg);
    else w.link(at[i - 1], 0, dg);
    w.link(dg, 2, addData(w, data[i]));
  });
  settle(w, at);
  return w.bytes();
}
