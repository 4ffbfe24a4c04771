import { isIP } from "node:net";

/**
 * Address of who asked, as the edge in front of the web process saw it: the last hop of X-Forwarded-For. Whatever stands
 * before it was written by the client.
 * @param trusted whether such an edge is configured (TRUST_PROXY); without one the header is anybody's claim
 * @returns null where no address can be believed
 */
export function clientAddress(headers: Headers, trusted: boolean): string | null {
  if (!trusted) return null;
  const last = headers.get("x-forwarded-for")?.split(",").at(-1)?.trim() ?? "";
  return isIP(last) === 0 ? null : last;
}
