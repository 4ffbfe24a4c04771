"use client";
import { useEffect, useRef, useState } from "react";
import { callApi } from "@/lib/client/api";
import type { LogPreview } from "@/lib/logs/preview/preview-log";
import type { StatedKey } from "@/lib/services/channel-keys/schema";

/** What the server understood of the log under a key, and what then still keeps the key from being saved. */
export interface KeyPreview {
  preview: LogPreview;
  missing: string | null;
}

const WAIT_MS = 250;

/** The log read anew a moment after the key last changed, by the same parse as the import; the newest answer counts. */
export function usePreview(runId: string, key: StatedKey, initial: KeyPreview) {
  const [answer, setAnswer] = useState(initial);
  const [error, setError] = useState<string | null>(null);
  const [isReading, setReading] = useState(false);
  const first = useRef(key);
  useEffect(() => {
    if (key === first.current) return;
    const stop = new AbortController();
    setReading(true);
    const timer = setTimeout(async () => {
      try {
        const path = `/api/runs/${runId}/channel-key`;
        setAnswer(await callApi<KeyPreview>(path, { method: "POST", json: { key }, signal: stop.signal }));
        setError(null);
        setReading(false);
      } catch (failure) {
        if (stop.signal.aborted) return;
        setError(failure instanceof Error ? failure.message : "The log could not be read. Try again.");
        setReading(false);
      }
    }, WAIT_MS);
    return () => {
      clearTimeout(timer);
      stop.abort();
    };
  }, [runId, key]);
  return { ...answer, error, isReading };
}
