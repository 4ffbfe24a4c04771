const THIN_SPACE = "\u202f";
const MINUS = "\u2212";

export interface NumberTextOptions {
  /** Digits behind the point; default 0. */
  decimals?: number;
  /** Print "+" on positive values, for differences. A value that rounds to zero carries no sign. */
  signed?: boolean;
}

/**
 * A number as it is shown: decimal point, thousands parted by a narrow no-break space, U+2212 as minus.
 * Null, NaN and infinities give an en dash: a gap stays visible as a gap.
 */
export function numberText(
  value: number | null | undefined,
  { decimals = 0, signed = false }: NumberTextOptions = {},
): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return "–";
  const digits = Math.abs(value).toFixed(decimals);
  const [whole = "0", fraction] = digits.split(".");
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, THIN_SPACE);
  const isZero = Number(digits) === 0;
  const sign = isZero ? "" : value < 0 ? MINUS : signed ? "+" : "";
  return sign + grouped + (fraction ? `.${fraction}` : "");
}

/**
 * Digits behind the point such that the last one is worth about a third of the half-width, at most 4;
 * `fallback` when no half-width is known or it is zero.
 */
export function decimalsForHalfWidth(halfWidth: number | null | undefined, fallback: number): number {
  if (!halfWidth || !Number.isFinite(halfWidth)) return fallback;
  return Math.min(4, Math.max(0, -Math.floor(Math.log10(Math.abs(halfWidth) / 3))));
}

/** "1 cell", "38 cells". */
export function counted(count: number, one: string, many = `${one}s`): string {
  return `${numberText(count)} ${count === 1 ? one : many}`;
}

/** "a", "a and b", "a, b and c". */
export function listed(parts: readonly string[]): string {
  if (parts.length < 2) return parts.join("");
  return `${parts.slice(0, -1).join(", ")} and ${parts.at(-1)}`;
}
