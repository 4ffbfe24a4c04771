import { useSyncExternalStore } from "react";

/** Holds the grid index under the cursor outside React, so that moving it renders the cursor and the strip, not the curves. */
export interface CursorStore {
  get: () => number | null;
  set: (index: number | null) => void;
  subscribe: (listener: () => void) => () => void;
}

export function createCursorStore(): CursorStore {
  let current: number | null = null;
  const listeners = new Set<() => void>();
  return {
    get: () => current,
    set: (index) => {
      if (index === current) return;
      current = index;
      for (const listener of listeners) listener();
    },
    subscribe: (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}

const onServer = () => null;

/** The index under the cursor, or null while it rests. */
export function useCursorIndex(store: CursorStore): number | null {
  return useSyncExternalStore(store.subscribe, store.get, onServer);
}
