/** Exact powers of ten: 10^0 to 10^22 are exactly representable, so one division rounds correctly. */
const TEN = Array.from({ length: 23 }, (_, i) => Number(`1e${i}`));
const MISSING = new Set([
  "",
  "nan",
  "na",
  "n/a",
  "#n/a",
  "null",
  "none",
  "nil",
  "-",
  "--",
  "---",
  "inf",
  "+inf",
  "-inf",
  "infinity",
  "-infinity",
  "-nan",
  "nan(ind)",
  "#num!",
  "#div/0!",
]);
const GROUPED_COMMA = /^[+-]?[1-9]\d{0,2}(,\d{3})+(\.\d+)?$/;
const GROUPED_DOT = /^[+-]?[1-9]\d{0,2}(\.\d{3})+(,\d+)?$/;
/** Thousands set off by a blank or an apostrophe. */
const GROUPED_BLANK = /^[+-]?\d{1,3}([ \u00a0\u202f'’]\d{3})+([.,]\d+)?$/;
const PLAIN = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;

/** True for the ways in which loggers write "no value here" (empty, NaN, NA, --, Inf). */
export function isMissingMark(cell: string): boolean {
  return MISSING.has(cell.trim().toLowerCase());
}

/**
 * Reads one cell with the given decimal sign. Returns the number, NaN for a missing mark, or null for text.
 * Thousands marks are taken off only where every group has three digits. Plain cells (at most 15 digits) are exact
 * without a library: the whole-number mantissa and 10^k are exact, one division rounds once.
 */
export function parseNumber(cell: string, decimal: "." | ","): number | null {
  const point = decimal === "." ? 46 : 44;
  let i = 0;
  let end = cell.length;
  while (i < end && cell.charCodeAt(i) <= 32) i++;
  while (end > i && cell.charCodeAt(end - 1) <= 32) end--;
  const from = i;
  let negative = false;
  const sign = cell.charCodeAt(i);
  if (i < end && (sign === 45 || sign === 43)) {
    negative = sign === 45;
    i++;
  }
  let mantissa = 0;
  let digits = 0;
  let fraction = -1;
  for (; i < end; i++) {
    const code = cell.charCodeAt(i);
    if (code >= 48 && code <= 57) {
      mantissa = mantissa * 10 + (code - 48);
      digits++;
      if (fraction >= 0) fraction++;
    } else if (code === point && fraction < 0) fraction = 0;
    else return slowNumber(cell.slice(from, end), decimal);
  }
  if (digits === 0 || digits > 15) return slowNumber(cell.slice(from, end), decimal);
  const value = fraction > 0 ? mantissa / (TEN[fraction] ?? 1) : mantissa;
  return negative ? -value : value;
}

/** A number without the blanks or apostrophes between its groups of thousands; any other text as it is. */
export function ungrouped(cell: string): string {
  return GROUPED_BLANK.test(cell) ? cell.replace(/[^\d.,+-]/g, "") : cell;
}

function slowNumber(text: string, decimal: "." | ","): number | null {
  if (isMissingMark(text)) return Number.NaN;
  let plain = ungrouped(text);
  if (decimal === ".") {
    if (GROUPED_COMMA.test(text)) plain = text.replaceAll(",", "");
  } else {
    if (GROUPED_DOT.test(text)) plain = text.replaceAll(".", "");
    else if (plain.includes(".")) return null;
    plain = plain.replace(",", ".");
  }
  if (!PLAIN.test(plain)) return null;
  const value = Number(plain);
  return Number.isFinite(value) ? value : Number.NaN;
}
