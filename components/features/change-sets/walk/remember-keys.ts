const STORED = "twinpass-single-keys";

/** Whether single keys act on this device; on unless switched off, also where nothing can be remembered. */
export function keysAreOn(): boolean {
  try {
    return window.localStorage.getItem(STORED) !== "off";
  } catch {
    return true;
  }
}

/** Remembers the choice on this device. */
export function rememberKeys(on: boolean): void {
  try {
    window.localStorage.setItem(STORED, on ? "on" : "off");
  } catch {
    // A browser that keeps nothing still obeys until the page is left.
  }
}
