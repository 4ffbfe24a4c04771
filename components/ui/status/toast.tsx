"use client";

import { X } from "lucide-react";
import { useEffect, useSyncExternalStore } from "react";

export interface Toast {
  id: number;
  text: string;
  /** Given: stays until answered, at most `UNDO_MS`. */
  undo?: { label: string; run: () => void };
}

/** Long enough to read; what can be undone stays ten seconds. */
const READ_MS = 6_000;
const UNDO_MS = 10_000;

let toasts: readonly Toast[] = [];
let lastId = 0;
const listeners = new Set<() => void>();

function replace(next: readonly Toast[]) {
  toasts = next;
  for (const listener of listeners) listener();
}

/** Says something in passing, to eye and ear. For anything that must not be missed use a Notice in the page. */
export function showToast(text: string, undo?: Toast["undo"]): void {
  lastId += 1;
  replace([...toasts.slice(-2), { id: lastId, text, undo }]);
}

function dismiss(id: number) {
  replace(toasts.filter((toast) => toast.id !== id));
}

const NONE: readonly Toast[] = [];

/** Where toasts appear; once, in the root layout. */
export function ToastRegion() {
  const shown = useSyncExternalStore(
    (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    () => toasts,
    () => NONE,
  );
  return (
    <div
      role="status"
      className="no-print pointer-events-none fixed inset-x-4 bottom-4 z-50 flex flex-col items-center gap-2"
    >
      {shown.map((toast) => (
        <ToastCard key={toast.id} toast={toast} />
      ))}
    </div>
  );
}

function ToastCard({ toast }: { toast: Toast }) {
  useEffect(() => {
    const timer = setTimeout(() => dismiss(toast.id), toast.undo ? UNDO_MS : READ_MS);
    return () => clearTimeout(timer);
  }, [toast]);
  return (
    <div className="pointer-events-auto flex max-w-full items-center gap-3 rounded bg-ink py-1 pr-1 pl-4 text-15 text-paper">
      <span>{toast.text}</span>
      {toast.undo && (
        <button
          type="button"
          className="min-h-control rounded px-3 font-semibold underline underline-offset-4"
          onClick={() => {
            toast.undo?.run();
            dismiss(toast.id);
          }}
        >
          {toast.undo.label}
        </button>
      )}
      <button
        type="button"
        aria-label="Close"
        className="inline-flex size-11 items-center justify-center rounded"
        onClick={() => dismiss(toast.id)}
      >
        <X aria-hidden size={18} />
      </button>
    </div>
  );
}
