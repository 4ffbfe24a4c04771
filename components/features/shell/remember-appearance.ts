const ONE_YEAR_S = 31_536_000;

/** Keeps a choice of looks in a cookie, so that the next page comes from the server in the right colours. Browser only. */
export function rememberAppearance(cookie: string, value: string): void {
  const secure = location.protocol === "https:" ? "; Secure" : "";
  // biome-ignore lint/suspicious/noDocumentCookie: the Cookie Store API is not in every browser we serve
  document.cookie = `${cookie}=${encodeURIComponent(value)}; Path=/; Max-Age=${ONE_YEAR_S}; SameSite=Lax${secure}`;
}
