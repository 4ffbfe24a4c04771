import { refuseLine } from "@/lib/calibration/image/record-bytes";
import {
  ADDRESS_LIMIT,
  formatAddress,
  type ImageNote,
  type ImageSegment,
} from "@/lib/calibration/image/types";

const FIRST_CAPACITY = 1 << 16;

/**
 * Gathers records in any order and makes sorted, merged segments of them. Memory goes with the data, never with the span
 * of addresses. Overlap with the same bytes is a note, with other bytes a refusal that names both lines.
 */
export class SegmentBuilder {
  private data = new Uint8Array(FIRST_CAPACITY);
  private used = 0;
  /** Four numbers a record: address, offset in `data`, length, line. */
  private readonly records: number[] = [];
  private ordered = true;

  /** Number of records with data. */
  get count(): number {
    return this.records.length / 4;
  }

  /** One past the last byte of the record given last. */
  get lastEnd(): number {
    const n = this.records.length;
    return n === 0 ? 0 : this.records[n - 4] + this.records[n - 2];
  }

  /** Room for `length` bytes of a record; returns where to put them. */
  reserve(address: number, length: number, line: number): { into: Uint8Array; offset: number } {
    if (address + length > ADDRESS_LIMIT) {
      refuseLine(
        "address_out_of_range",
        line,
        `the data end beyond address ${formatAddress(ADDRESS_LIMIT - 1)}.`,
      );
    }
    if (this.used + length > this.data.length) {
      const larger = new Uint8Array(Math.max(2 * this.data.length, this.used + length));
      larger.set(this.data.subarray(0, this.used));
      this.data = larger;
    }
    if (address < this.lastEnd) this.ordered = false;
    this.records.push(address, this.used, length, line);
    const offset = this.used;
    this.used += length;
    return { into: this.data, offset };
  }

  /** Sorted, merged segments; adds a note where records repeat or stand out of order. */
  build(notes: ImageNote[]): ImageSegment[] {
    const { records } = this;
    const order = Array.from({ length: this.count }, (_, i) => 4 * i);
    if (!this.ordered) order.sort((a, b) => records[a] - records[b] || a - b);
    const segments: ImageSegment[] = [];
    let repeated = 0;
    for (let i = 0; i < order.length; ) {
      const address = records[order[i]];
      let end = address;
      let j = i;
      while (j < order.length && records[order[j]] <= end) {
        end = Math.max(end, records[order[j]] + records[order[j] + 2]);
        j++;
      }
      const bytes = new Uint8Array(end - address);
      let filled = address;
      for (let k = i; k < j; k++) {
        const r = order[k];
        const at = records[r];
        const source = this.data.subarray(records[r + 1], records[r + 1] + records[r + 2]);
        const overlap = Math.min(Math.max(0, filled - at), source.length);
        for (let b = 0; b < overlap; b++) {
          if (bytes[at - address + b] !== source[b]) this.refuseOverlap(order, i, k, at + b);
        }
        if (overlap > 0) repeated++;
        bytes.set(source.subarray(overlap), at - address + overlap);
        filled = Math.max(filled, at + source.length);
      }
      segments.push({ address, bytes });
      i = j;
    }
    if (repeated > 0)
      notes.push({
        code: "data_repeated",
        message: `${repeated} records repeat bytes that were given before, with the same values.`,
      });
    else if (!this.ordered)
      notes.push({
        code: "records_out_of_order",
        message: "The records are not in rising order of addresses; they were sorted.",
      });
    return segments;
  }

  private refuseOverlap(order: readonly number[], from: number, to: number, address: number): never {
    const { records } = this;
    const own = records[order[to] + 3];
    let other = own;
    for (let k = from; k < to; k++) {
      const at = records[order[k]];
      if (at <= address && address < at + records[order[k] + 2]) other = records[order[k] + 3];
    }
    const [first, second] = [Math.min(own, other), Math.max(own, other)];
    refuseLine(
      "overlap_differs",
      second,
      `the byte at ${formatAddress(address)} was given another value in line ${first}. Which one holds is in doubt; addresses counted in words can look like this too.`,
    );
  }
}
