const CHECKED_AT_ONCE = 1 << 20;

/** Whether the bytes are sound UTF-8. Looks at a piece at a time, so that a large file is never a string. */
export function isUtf8(bytes: Uint8Array): boolean {
  const strict = new TextDecoder("utf-8", { fatal: true });
  try {
    for (let at = 0; at < bytes.length; at += CHECKED_AT_ONCE)
      strict.decode(bytes.subarray(at, at + CHECKED_AT_ONCE), { stream: true });
    strict.decode();
    return true;
  } catch {
    return false;
  }
}
