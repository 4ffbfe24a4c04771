/** Digits that a result keeps: far below any uncertainty, far above the last bits in which machines may differ. */
const DIGITS = 7;

/** A copy with every number rounded to 7 significant digits, NaN and infinities as null, absent members left out. */
export function roundResult<T>(value: T): T {
  return rounded(value) as T;
}

function rounded(value: unknown): unknown {
  if (typeof value === "number") return Number.isFinite(value) ? Number(value.toPrecision(DIGITS)) : null;
  if (Array.isArray(value)) return value.map(rounded);
  if (value !== null && typeof value === "object") {
    return Object.fromEntries(
      Object.entries(value).flatMap(([key, member]) =>
        member === undefined ? [] : [[key, rounded(member)]],
      ),
    );
  }
  return value;
}
