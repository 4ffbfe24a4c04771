"use client";

import { useEffect, useRef } from "react";
import type { Range } from "@/components/charts/frame/series";
import { readSpanHash, withSurroundings } from "@/components/charts/stack/span-hash";

/** Calls `onSpan` whenever the address or a link asks the chart `anchor` for a span, also when the page opens with one. */
export function useSpanHash(
  anchor: string | undefined,
  xs: readonly number[],
  onSpan: (range: Range) => void,
): void {
  const latest = useRef(onSpan);
  useEffect(() => {
    latest.current = onSpan;
  });
  useEffect(() => {
    if (anchor === undefined) return;
    const read = () => {
      const span = readSpanHash(anchor, window.location.hash);
      if (span) latest.current(withSurroundings(span, xs));
    };
    // A link to the span that the address has already changes no hash, but is asked for again.
    const again = ({ target }: MouseEvent) => {
      const link = target instanceof Element ? target.closest("a") : null;
      if (link?.getAttribute("href") === window.location.hash) read();
    };
    read();
    window.addEventListener("hashchange", read);
    window.addEventListener("click", again);
    return () => {
      window.removeEventListener("hashchange", read);
      window.removeEventListener("click", again);
    };
  }, [anchor, xs]);
}
