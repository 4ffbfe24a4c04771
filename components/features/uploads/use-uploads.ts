"use client";
import { useCallback, useEffect, useReducer, useRef } from "react";
import { ApiError, callApi } from "@/lib/client/api";
import { sendFile } from "@/lib/client/send-file";
import type { BeginUpload, UploadState } from "@/lib/services/uploads/schema";

export type UploadPhase = "waiting" | "checking" | "sending" | "sent" | "attaching" | "attached" | "refused";

/** One file on its way. Its row stays until the person removes it. */
export interface UploadItem {
  id: string;
  file: File;
  phase: UploadPhase;
  doneBytes: number;
  /** When sending began (ms), for speed and time left. */
  sinceMs: number | null;
  /** A plain sentence: why refused, or what came of it. */
  message: string | null;
  alreadyUsed: string[];
  uploadId: string | null;
  /** One for each item, so that a repeated attach makes one thing. */
  idempotencyKey: string;
}

type Change =
  | { type: "add"; items: UploadItem[] }
  | { type: "set"; id: string; values: Partial<UploadItem> }
  | { type: "remove"; id: string };

function reduce(items: UploadItem[], change: Change): UploadItem[] {
  switch (change.type) {
    case "add":
      return [...items, ...change.items];
    case "set":
      return items.map((item) => (item.id === change.id ? { ...item, ...change.values } : item));
    case "remove":
      return items.filter((item) => item.id !== change.id);
  }
}

/** Whether a file is not at the server yet and still may get there. */
export const isOnItsWay = ({ phase }: UploadItem): boolean =>
  phase === "waiting" || phase === "checking" || phase === "sending";

const AT_ONCE = 2;
const sentenceOf = (error: unknown) =>
  error instanceof Error ? error.message : "It did not work. Try again.";

/**
 * A list of files that are checked and sent two at a time. Files refused never hold up files accepted.
 * Leaving the page with unsent files asks first.
 */
export function useUploads(purpose: BeginUpload["purpose"]) {
  const [items, change] = useReducer(reduce, []);
  const stops = useRef(new Map<string, AbortController>());

  const set = useCallback(
    (id: string, values: Partial<UploadItem>) => change({ type: "set", id, values }),
    [],
  );

  const send = useCallback(
    async (item: UploadItem) => {
      const stop = new AbortController();
      stops.current.set(item.id, stop);
      set(item.id, { phase: "checking", doneBytes: 0, sinceMs: Date.now(), message: null });
      try {
        const upload: UploadState = await sendFile(
          item.file,
          purpose,
          ({ phase, doneBytes }) => set(item.id, { phase, doneBytes }),
          stop.signal,
        );
        const { uploadId, alreadyUsed } = upload;
        set(item.id, { phase: "sent", doneBytes: item.file.size, uploadId, alreadyUsed });
      } catch (error) {
        if (!stop.signal.aborted) set(item.id, { phase: "refused", message: sentenceOf(error) });
      } finally {
        stops.current.delete(item.id);
      }
    },
    [purpose, set],
  );

  useEffect(() => {
    const running = items.filter((item) => stops.current.has(item.id)).length;
    const next = items.filter((item) => item.phase === "waiting" && !stops.current.has(item.id));
    for (const item of next.slice(0, Math.max(0, AT_ONCE - running))) void send(item);
  }, [items, send]);

  const isUnfinished = items.some((item) => !["attached", "refused"].includes(item.phase));
  useEffect(() => {
    if (!isUnfinished) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", ask);
    return () => window.removeEventListener("beforeunload", ask);
  }, [isUnfinished]);

  /** Takes files; a reason refuses the file at once, in its own row. */
  const add = useCallback((files: { file: File; refusal: string | null }[]) => {
    const made = files.map(({ file, refusal }) => ({
      id: crypto.randomUUID(),
      file,
      phase: refusal ? ("refused" as const) : ("waiting" as const),
      doneBytes: 0,
      sinceMs: null,
      message: refusal,
      alreadyUsed: [],
      uploadId: null,
      idempotencyKey: crypto.randomUUID(),
    }));
    change({ type: "add", items: made });
    return made;
  }, []);

  /** Stops and takes the row away; what already arrived is given up at the server too. */
  const remove = useCallback((item: UploadItem) => {
    stops.current.get(item.id)?.abort(new Error("cancelled"));
    stops.current.delete(item.id);
    if (item.uploadId && item.phase !== "attached") {
      void callApi(`/api/uploads/${item.uploadId}`, { method: "DELETE" }).catch(() => undefined);
    }
    change({ type: "remove", id: item.id });
  }, []);

  const retry = useCallback(
    (item: UploadItem) => set(item.id, { phase: item.uploadId ? "sent" : "waiting", message: null }),
    [set],
  );

  /** Turns a sent file into what it is for; the sentence that comes back stands in the row. */
  const attach = useCallback(
    async (item: UploadItem, work: (uploadId: string, idempotencyKey: string) => Promise<string>) => {
      if (!item.uploadId) return;
      set(item.id, { phase: "attaching", message: null });
      try {
        set(item.id, { phase: "attached", message: await work(item.uploadId, item.idempotencyKey) });
      } catch (error) {
        // A refused request may be corrected and needs another key; one without an answer may have worked and keeps its own.
        const isRefused = error instanceof ApiError && error.status >= 400 && error.status < 500;
        const idempotencyKey = isRefused ? crypto.randomUUID() : item.idempotencyKey;
        set(item.id, { phase: "sent", message: sentenceOf(error), idempotencyKey });
      }
    },
    [set],
  );

  return { items, add, remove, retry, attach };
}
