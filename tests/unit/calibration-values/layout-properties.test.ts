import fc from "fast-check";
import { expect, it, vi } from "vitest";
import type { ByteOrder, DataType, LayoutComponent } from "@/lib/calibration/a2l/types";
import { axis, characteristic, component, layout, readOne } from "@/tests/support/made-description";

vi.setConfig({ testTimeout: 60_000 });

/** Whole-number types: bytes, and whether the highest bit is a sign. */
const TYPES: Partial<Record<DataType, [number, boolean]>> = {
  UBYTE: [1, false],
  SBYTE: [1, true],
  UWORD: [2, false],
  SWORD: [2, true],
  ULONG: [4, false],
  SLONG: [4, true],
  A_UINT64: [8, false],
  A_INT64: [8, true],
};
const typed = fc.constantFrom(...(Object.keys(TYPES) as DataType[]));
const sizeOf = (type: DataType) => TYPES[type]?.[0] ?? 0;

/** Writes records as the standard's text says, on its own: a list of bytes that grows, room filled with 0xEE. */
class Writer {
  readonly bytes: number[] = [];
  constructor(
    private readonly order: ByteOrder,
    private readonly alignments: Partial<Record<DataType, number>>,
  ) {}
  align(type: DataType): void {
    const step = this.alignments[type] ?? sizeOf(type);
    // The record begins at 0x1000, which every alignment used here divides; the first thing needs no room.
    while (this.bytes.length % step !== 0) this.bytes.push(0xee);
  }
  put(type: DataType, value: bigint): void {
    const size = sizeOf(type);
    const rising = Array.from({ length: size }, (_, k) => Number((value >> BigInt(8 * k)) & 255n));
    const falling = [...rising].reverse();
    const swap = (bytes: number[]) =>
      size < 4
        ? bytes
        : Array.from({ length: size / 2 }, (_, w) => bytes.slice(size - 2 * w - 2, size - 2 * w)).flat();
    const bytes = {
      little: rising,
      big: falling,
      little_words_swapped: swap(rising),
      big_words_swapped: swap(falling),
    };
    this.bytes.push(...bytes[this.order]);
  }
}
const value = (type: DataType, seed: bigint): bigint => {
  const [size, isSigned] = TYPES[type] ?? [1, false];
  return isSigned ? BigInt.asIntN(8 * size, seed) : BigInt.asUintN(8 * size, seed);
};
const json = (whole: bigint) => (Number.isSafeInteger(Number(whole)) ? Number(whole) : whole.toString());

it("what is written by a layout is read back, cell by cell", () => {
  const made = fc.record({
    counts: fc.tuple(fc.integer({ min: 1, max: 5 }), fc.integer({ min: 1, max: 4 })),
    spare: fc.tuple(fc.nat(3), fc.nat(3)),
    types: fc.tuple(typed, typed, typed, typed),
    order: fc.constantFrom<ByteOrder>("little", "big", "little_words_swapped", "big_words_swapped"),
    columns: fc.boolean(),
    isStatic: fc.boolean(),
    keepsStarts: fc.boolean(),
    reserved: fc.nat(2),
    packed: fc.boolean(),
    firstX: fc.boolean(),
    gap: fc.integer({ min: 1, max: 9 }),
    seeds: fc.array(fc.bigInt({ min: 0n, max: 2n ** 64n - 1n }), { minLength: 40, maxLength: 40 }),
  });
  fc.assert(
    fc.property(made, (one) => {
      const [nx, ny] = one.counts;
      const [mostX, mostY] = [nx + one.spare[0], ny + one.spare[1]];
      const [countType, xType, yType, cellType] = one.types;
      const alignments = one.packed ? Object.fromEntries(Object.keys(TYPES).map((type) => [type, 1])) : {};
      const writer = new Writer(one.order, alignments);
      const components: LayoutComponent[] = [];
      const add = (keyword: string, type: DataType, more: Partial<LayoutComponent> = {}) => {
        components.push(component(one.gap * (components.length + 2), keyword, type, more));
        writer.align(type);
      };
      let seed = 0;
      const next = (type: DataType) => value(type, one.seeds[seed++ % one.seeds.length]);

      add("NO_AXIS_PTS_Y", countType);
      writer.put(countType, BigInt(ny));
      for (let k = 0; k < one.reserved; k++) {
        add("RESERVED", "UBYTE");
        writer.put("UBYTE", 0xeen);
      }
      add("NO_AXIS_PTS_X", countType);
      writer.put(countType, BigInt(nx));
      const points: Record<string, bigint[]> = {};
      const addAxis = (letter: "X" | "Y", type: DataType, used: number, most: number) => {
        add(`AXIS_PTS_${letter}`, type);
        points[letter] = Array.from({ length: used }, () => next(type));
        for (const point of points[letter]) writer.put(type, point);
        for (let k = used; (one.isStatic || one.keepsStarts) && k < most; k++) writer.put(type, 0xeen);
      };
      const axes = [() => addAxis("X", xType, nx, mostX), () => addAxis("Y", yType, ny, mostY)];
      for (const write of one.firstX ? axes : axes.reverse()) write();
      add("FNC_VALUES", cellType, { indexMode: one.columns ? "COLUMN_DIR" : "ROW_DIR" });
      const cells = Array.from({ length: ny }, () => Array.from({ length: nx }, () => next(cellType)));
      const [keptX, keptY] = one.isStatic ? [mostX, mostY] : [nx, ny];
      const cell = (x: number, y: number) => writer.put(cellType, x < nx && y < ny ? cells[y][x] : 0xeen);
      if (one.columns) for (let x = 0; x < keptX; x++) for (let y = 0; y < keptY; y++) cell(x, y);
      else for (let y = 0; y < keptY; y++) for (let x = 0; x < keptX; x++) cell(x, y);

      const read = readOne(
        {
          byteOrder: one.order,
          alignments,
          characteristics: [
            characteristic({ type: "MAP", axes: [axis({ maxPoints: mostX }), axis({ maxPoints: mostY })] }),
          ],
          layouts: [layout(components, { isStatic: one.isStatic, keepsStarts: one.keepsStarts })],
        },
        writer.bytes,
      );
      expect(read.dims).toEqual([nx, ny]);
      expect(read.raw).toEqual(cells.flat().map(json));
      expect(read.axes[0].raw).toEqual(points.X.map(json));
      expect(read.axes[1].raw).toEqual(points.Y.map(json));
      for (const { address, length } of read.bytes) {
        expect(address).toBeGreaterThanOrEqual(0x1000);
        expect(address + length).toBeLessThanOrEqual(0x1000 + writer.bytes.length);
      }
    }),
    { numRuns: 200 },
  );
});
