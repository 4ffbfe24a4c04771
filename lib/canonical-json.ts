import { createHash } from "node:crypto";

/**
 * JSON with sorted keys and no white space, after the ordering rule of RFC 8785: the same content gives the same text.
 * Undefined members are left out, as JSON does; non-finite numbers are refused because JSON would turn them into null.
 * @throws RangeError on NaN or an infinity
 */
export function canonicalJson(value: unknown): string {
  if (typeof value === "number" && !Number.isFinite(value))
    throw new RangeError(`not a JSON number: ${value}`);
  if (value instanceof Date) return JSON.stringify(value);
  if (Array.isArray(value)) return `[${value.map((item) => canonicalJson(item ?? null)).join(",")}]`;
  if (typeof value === "object" && value !== null) {
    const members = Object.entries(value)
      .filter(([, member]) => member !== undefined)
      .sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0))
      .map(([key, member]) => `${JSON.stringify(key)}:${canonicalJson(member)}`);
    return `{${members.join(",")}}`;
  }
  return JSON.stringify(value ?? null);
}

/** SHA-256 (64 hex digits) of the canonical JSON of a value. */
export function digestOf(value: unknown): string {
  return createHash("sha256").update(canonicalJson(value)).digest("hex");
}
