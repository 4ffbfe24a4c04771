import { ApiError, callApi } from "@/lib/client/api";
import { hashFile } from "@/lib/client/hash-file";
import type { BeginUpload, UploadState } from "@/lib/services/uploads/schema";

const TRIES_A_PART = 5;
const WAIT_MS = 1_000;

export interface SendProgress {
  phase: "checking" | "sending";
  doneBytes: number;
}

const wait = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms));
const isWorthAnotherTry = (error: unknown) =>
  error instanceof ApiError && (error.status === 0 || error.status >= 500);

async function sendPart(file: File, state: UploadState, signal: AbortSignal): Promise<UploadState> {
  const from = state.receivedBytes;
  const path = `/api/uploads/${state.uploadId}`;
  for (let attempt = 1; ; attempt += 1) {
    try {
      const bytes = file.slice(from, from + state.partBytes);
      return await callApi<UploadState>(`${path}?offset=${from}`, { method: "PUT", bytes, signal });
    } catch (error) {
      if (!isWorthAnotherTry(error) || attempt === TRIES_A_PART) throw error;
      await wait(WAIT_MS * 2 ** (attempt - 1));
      // The answer may have been lost, not the part: ask how far the server is.
      const now = await callApi<UploadState>(path, { signal }).catch(() => null);
      if (now && now.receivedBytes > from) return now;
    }
  }
}

/**
 * Sends one file in parts: fingerprint, declaration, parts, each acknowledged when durable. A broken line is tried again.
 * @returns the upload, with every byte at the server
 * @throws ApiError | Error with a plain sentence; the signal's reason when cancelled
 */
export async function sendFile(
  file: File,
  purpose: BeginUpload["purpose"],
  onProgress: (progress: SendProgress) => void,
  signal: AbortSignal,
): Promise<UploadState> {
  const sha256 = await hashFile(file, (doneBytes) => onProgress({ phase: "checking", doneBytes }), signal);
  const declared: BeginUpload = { purpose, fileName: file.name, sizeBytes: file.size, sha256 };
  const begun = await callApi<UploadState>("/api/uploads", { method: "POST", json: declared, signal });
  let state = begun;
  while (state.receivedBytes < state.sizeBytes) {
    onProgress({ phase: "sending", doneBytes: state.receivedBytes });
    state = await sendPart(file, state, signal);
  }
  return { ...state, alreadyUsed: begun.alreadyUsed };
}
