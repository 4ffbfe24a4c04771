type Answer = { doneBytes: number } | { digest: string } | { failure: string };

/**
 * SHA-256 of a file as 64 hex digits, made in a worker in flat memory.
 * @param onProgress told the bytes hashed so far
 * @throws Error with a plain sentence when the file can't be read; the signal's reason when aborted
 */
export function hashFile(
  file: Blob,
  onProgress: (doneBytes: number) => void,
  signal: AbortSignal,
): Promise<string> {
  return new Promise((resolve, reject) => {
    const worker = new Worker(new URL("./hash-worker.ts", import.meta.url), { type: "module" });
    const end = (settle: () => void) => {
      worker.terminate();
      settle();
    };
    signal.addEventListener("abort", () => end(() => reject(signal.reason)), { once: true });
    worker.onerror = () =>
      end(() => reject(new Error("The fingerprint could not be made in this browser. Reload the page.")));
    worker.onmessage = ({ data }: MessageEvent<Answer>) => {
      if ("digest" in data) end(() => resolve(data.digest));
      else if ("failure" in data) end(() => reject(new Error(data.failure)));
      else onProgress(data.doneBytes);
    };
    worker.postMessage(file);
  });
}
