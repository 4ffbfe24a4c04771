/** Puts what is shown into the address, beside what is there, so that a copied link shows the same. */
export function rememberInAddress(parameters: Record<string, string>): void {
  const address = new URL(window.location.href);
  for (const [name, value] of Object.entries(parameters)) {
    if (value === "") address.searchParams.delete(name);
    else address.searchParams.set(name, value);
  }
  window.history.replaceState(null, "", `${address.pathname}${address.search}${address.hash}`);
}
