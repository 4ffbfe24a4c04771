"use client";

import { useEffect, useRef } from "react";

/** Closes the `details` around it by Escape, by a press outside, by leaving with Tab, and by following a link in it. */
export function MenuBehaviour() {
  const anchor = useRef<HTMLSpanElement>(null);

  useEffect(() => {
    const details = anchor.current?.closest("details");
    if (!details) return;
    const close = (event: Event) => {
      if (!details.open) return;
      if (event instanceof KeyboardEvent) {
        if (event.key !== "Escape") return;
        details.open = false;
        details.querySelector("summary")?.focus();
      } else if (event.target instanceof Node && !details.contains(event.target)) {
        details.open = false;
      }
    };
    const leave = (event: Event) => {
      if (event.target instanceof Element && event.target.closest("a")) details.open = false;
    };
    details.addEventListener("click", leave);
    for (const kind of ["pointerdown", "focusin", "keydown"]) document.addEventListener(kind, close);
    return () => {
      details.removeEventListener("click", leave);
      for (const kind of ["pointerdown", "focusin", "keydown"]) document.removeEventListener(kind, close);
    };
  }, []);

  return <span ref={anchor} hidden />;
}
