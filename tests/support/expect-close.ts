import { expect } from "vitest";

/** Absolute or relative tolerance; with both, the wider one holds. */
export interface Tolerance {
  abs?: number;
  rel?: number;
}

/** Expects a number within a stated tolerance of a value from outside the code under test. */
export function expectClose(got: number | null | undefined, expected: number, tolerance: Tolerance): void {
  const allowed = Math.max(tolerance.abs ?? 0, (tolerance.rel ?? 0) * Math.abs(expected));
  expect(got, `expected ${expected} ± ${allowed}`).not.toBeNull();
  const miss = Math.abs((got ?? Number.NaN) - expected);
  expect(miss <= allowed, `got ${got}, expected ${expected} ± ${allowed}`).toBe(true);
}
