/**
 * Whether a request that changes something comes from our own pages (OWASP ASVS 5.0, 3.5.1).
 * The Origin header must be there and be ours: absent, `null` and foreign ones are refused, and so is a cross-site fetch.
 */
export function isOwnOrigin(headers: Headers, ownOrigin: string): boolean {
  const site = headers.get("sec-fetch-site");
  if (site !== null && site !== "same-origin") return false;
  return headers.get("origin") === new URL(ownOrigin).origin;
}
