import { refuseLine } from "@/lib/calibration/image/record-bytes";
import {
  ADDRESS_LIMIT,
  formatAddress,
  type ImageNote,
  type ImageSegment,
} from "@/lib/calibration/image/types";

const FIRST_CAPACITY = 1 << 16;

/** Records that followed each other without a gap: their address, and where their bytes lie in the gathered data. */
interface Run {
  address: number;
  offset: number;
  length: number;
}

/**
 * Gathers records in any order and makes sorted, merged segments of them. Memory goes with the data, never with the span
 * of addresses. Overlap with the same bytes is a note, with other bytes a refusal that names both lines.
 */
export class SegmentBuilder {
  /** Bytes of all records in the order given; replaced by a larger one as they grow. */
  data = new Uint8Array(FIRST_CAPACITY);
  private used = 0;
  private readonly runs: Run[] = [];
  /** Of each record: where its bytes begin in `data`, and its line. */
  private readonly offsets: number[] = [];
  private readonly lines: number[] = [];
  private ordered = true;
  /** One past the last byte of the record given last. */
  lastEnd = 0;

  /** Number of records with data. */
  get count(): number {
    return this.offsets.length;
  }

  /** Room for `length` bytes of a record; returns from where on in `data` to put them. */
  reserve(address: number, length: number, line: number): number {
    if (address + length > ADDRESS_LIMIT) {
      refuseLine(
        "address_out_of_range",
        line,
        `the data end beyond address ${formatAddress(ADDRESS_LIMIT - 1)}.`,
      );
    }
    const offset = this.used;
    if (offset + length > this.data.length) this.grow(offset + length);
    if (address === this.lastEnd && this.runs.length > 0) this.runs[this.runs.length - 1].length += length;
    else this.runs.push({ address, offset, length });
    if (address < this.lastEnd) this.ordered = false;
    this.lastEnd = address + length;
    this.offsets.push(offset);
    this.lines.push(line);
    this.used = offset + length;
    return offset;
  }

  private grow(least: number): void {
    const larger = new Uint8Array(Math.max(2 * this.data.length, least));
    larger.set(this.data.subarray(0, this.used));
    this.data = larger;
  }

  /** Sorted, merged segments; adds a note where records repeat or stand out of order. */
  build(notes: ImageNote[]): ImageSegment[] {
    const runs = this.ordered
      ? this.runs
      : [...this.runs].sort((a, b) => a.address - b.address || a.offset - b.offset);
    const segments: ImageSegment[] = [];
    let repeated = 0;
    for (let i = 0; i < runs.length; ) {
      const { address } = runs[i];
      let end = address;
      let j = i;
      while (j < runs.length && runs[j].address <= end) {
        end = Math.max(end, runs[j].address + runs[j].length);
        j++;
      }
      const bytes = new Uint8Array(end - address);
      let filled = address;
      for (let k = i; k < j; k++) {
        const { address: at, offset, length } = runs[k];
        const overlap = Math.min(Math.max(0, filled - at), length);
        for (let b = 0; b < overlap; b++) {
          if (bytes[at - address + b] !== this.data[offset + b])
            this.refuseOverlap(runs.slice(i, k), at + b, offset + b);
        }
        if (overlap > 0) repeated += this.recordOf(offset + overlap - 1) - this.recordOf(offset) + 1;
        bytes.set(this.data.subarray(offset + overlap, offset + length), at - address + overlap);
        filled = Math.max(filled, at + length);
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

  /** Number of the record that holds the byte at `offset` of the data, by bisection. */
  private recordOf(offset: number): number {
    let low = 0;
    let high = this.offsets.length - 1;
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if (this.offsets[middle] <= offset) low = middle;
      else high = middle - 1;
    }
    return low;
  }

  /** @param offset of the byte in the data; one of `earlier` gave another value for the same address */
  private refuseOverlap(earlier: readonly Run[], address: number, offset: number): never {
    const own = this.lines[this.recordOf(offset)];
    const run = earlier.findLast((r) => r.address <= address && address < r.address + r.length);
    const other = run ? this.lines[this.recordOf(run.offset + address - run.address)] : own;
    const [first, second] = [Math.min(own, other), Math.max(own, other)];
    refuseLine(
      "overlap_differs",
      second,
      `the byte at ${formatAddress(address)} was given another value in line ${first}. Which one holds is in doubt; addresses counted in words can look like this too.`,
    );
  }
}
