"use client";

import { useEffect, useRef, useState } from "react";

/** Width that the server draws at, px; the height never changes, so nothing jumps when the real width is known. */
const SERVER_WIDTH = 760;

/** Width of the element the ref is put on, in whole pixels; `SERVER_WIDTH` until it was measured. */
export function useChartWidth() {
  const ref = useRef<HTMLDivElement>(null);
  const [width, setWidth] = useState(SERVER_WIDTH);
  useEffect(() => {
    const element = ref.current;
    if (!element || typeof ResizeObserver === "undefined") return;
    const observer = new ResizeObserver(([entry]) => {
      const measured = Math.round(entry?.contentRect.width ?? 0);
      if (measured > 0) setWidth(measured);
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return { ref, width };
}
