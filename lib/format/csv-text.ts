import Papa from "papaparse";

/**
 * Texts that a spreadsheet would take for a formula and that get an apostrophe in front (OWASP ASVS 5.0, 1.2.10); a plain number
 * with a sign is none. So do texts that begin with an apostrophe, so that the one put there can be taken off again.
 */
const FORMULA_START = /^(?![+-]?\d+(?:[.,]\d+)?$)['=+\-@\t\r\n\0]/;

/** Rows of cells as CSV (RFC 4180), each row with its line end; null is an empty cell. Nothing in it runs as a formula. */
export const csvText = (rows: (string | number | null)[][]): string =>
  `${Papa.unparse(rows, { escapeFormulae: FORMULA_START })}\r\n`;
