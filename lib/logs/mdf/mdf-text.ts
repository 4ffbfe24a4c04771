import { type MdfFile, readU64 } from "@/lib/logs/mdf/mdf-blocks";
import { type InflateBudget, readStream } from "@/lib/logs/mdf/mdf-data";
import type { MdfChannel } from "@/lib/logs/mdf/mdf-tree";
import type { RecordRows } from "@/lib/logs/mdf/mdf-values";

const LONGEST_SHOWN = 40;
const ENCODINGS: Readonly<Record<number, string>> = {
  6: "windows-1252",
  7: "utf-8",
  8: "utf-16le",
  9: "utf-16be",
};

function shown(bytes: Uint8Array, dataType: number): string {
  const text = new TextDecoder(ENCODINGS[dataType]).decode(bytes.subarray(0, 4 * LONGEST_SHOWN));
  const end = text.indexOf("\u0000");
  return (end < 0 ? text : text.slice(0, end)).slice(0, LONGEST_SHOWN);
}

/** Text at an offset of a stream of values of variable length: four bytes of length, then the text. Null: not inside. */
function variableText(stream: Uint8Array, offset: number, dataType: number): string | null {
  if (!(offset + 4 <= stream.length)) return null;
  const length = new DataView(stream.buffer, stream.byteOffset).getUint32(offset, true);
  return offset + 4 + length <= stream.length
    ? shown(stream.subarray(offset + 4, offset + 4 + length), dataType)
    : null;
}

/**
 * First and last value of a text channel, so that a tester sees what was left out; null when there is none or the file's links to it
 * do not hold. `grouped`: values of variable length that lie in a channel group of their own, by its address.
 */
export function textEnds(
  file: MdfFile,
  records: RecordRows,
  channel: MdfChannel,
  grouped: ReadonlyMap<number, Uint8Array>,
  budget: InflateBudget,
): [string, string] | null {
  const { bytes, stride, rows, dataBytes } = records;
  const { byteOffset, bitCount, dataType } = channel;
  const size = Math.ceil(bitCount / 8);
  if (rows === 0 || byteOffset + size > dataBytes) return null;
  const places = [byteOffset, (rows - 1) * stride + byteOffset];
  if (channel.type !== 1) {
    const [first, last] = places.map((at) => shown(bytes.subarray(at, at + size), dataType));
    return [first, last];
  }
  if (size < 8 || channel.dataLink === 0) return null;
  const stream = grouped.get(channel.dataLink) ?? readStream(file, channel.dataLink, "SD", budget);
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const [first, last] = places.map((at) => variableText(stream, readU64(view, at), dataType));
  return first === null || last === null ? null : [first, last];
}
