const HOME = "/programmes";
const NOWHERE = "http://nowhere.invalid";

/** A path of our own site to go to after signing in; anything else, also `//elsewhere`, gives the list of programmes. */
export function ownPath(value: unknown): string {
  if (typeof value !== "string" || !value.startsWith("/") || !URL.canParse(value, NOWHERE)) return HOME;
  const url = new URL(value, NOWHERE);
  if (url.origin !== NOWHERE || url.pathname.startsWith("//")) return HOME;
  return `${url.pathname}${url.search}`;
}
