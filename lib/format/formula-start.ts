/**
 * Texts that a spreadsheet would take for a formula and that get an apostrophe in front in a CSV export (OWASP ASVS 5.0, 1.2.10); a
 * plain number with a sign is none. So do texts that begin with an apostrophe, so that the one put there can be taken off again.
 */
export const FORMULA_START = /^(?![+-]?\d+(?:[.,]\d+)?$)['=+\-@\t\r\n\0]/;
