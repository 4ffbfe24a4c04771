"use client";

import { ChevronDown } from "lucide-react";
import { type ReactNode, useEffect, useRef } from "react";
import { cn } from "@/lib/cn";

export interface MenuProps {
  /** What the closed menu shows. */
  label: ReactNode;
  /** Name for assistive technology when `label` alone does not say it. */
  name?: string;
  /** Which edge of the label the panel keeps to. */
  align?: "left" | "right";
  /** Links, buttons or small forms, one under the other. */
  children: ReactNode;
}

/** A small panel that opens under its label. Opens without script; Escape, a click outside, leaving by Tab or going somewhere close it. */
export function Menu({ label, name, align = "right", children }: MenuProps) {
  const box = useRef<HTMLDetailsElement>(null);

  useEffect(() => {
    const close = (event: Event) => {
      const details = box.current;
      if (!details?.open) return;
      if (event instanceof KeyboardEvent && event.key === "Escape") {
        details.open = false;
        details.querySelector("summary")?.focus();
      }
      const outside = event.target instanceof Node && !details.contains(event.target);
      if (outside && !(event instanceof KeyboardEvent)) details.open = false;
    };
    const leave = (event: Event) => {
      const details = box.current;
      if (details && event.target instanceof Element && event.target.closest("a")) details.open = false;
    };
    const panel = box.current;
    panel?.addEventListener("click", leave);
    document.addEventListener("pointerdown", close);
    document.addEventListener("focusin", close);
    document.addEventListener("keydown", close);
    return () => {
      panel?.removeEventListener("click", leave);
      document.removeEventListener("pointerdown", close);
      document.removeEventListener("focusin", close);
      document.removeEventListener("keydown", close);
    };
  }, []);

  return (
    <details ref={box} className="group relative">
      <summary
        aria-label={name}
        className="flex min-h-control list-none items-center gap-1 rounded px-2 text-15 hover:bg-sunk [&::-webkit-details-marker]:hidden"
      >
        {label}
        <ChevronDown aria-hidden size={16} className="shrink-0 text-ink2 group-open:rotate-180" />
      </summary>
      <div
        className={cn(
          "absolute z-30 mt-1 flex w-max min-w-48 max-w-[calc(100vw-2rem)] flex-col rounded border border-edge bg-surface p-1 text-15",
          align === "right" ? "right-0" : "left-0",
        )}
      >
        {children}
      </div>
    </details>
  );
}

/** Class names for one entry of a menu, be it a link or a button. */
export const menuEntry =
  "flex min-h-control w-full items-center gap-2 rounded px-3 py-2 text-left text-15 text-ink no-underline hover:bg-sunk aria-[current]:font-semibold";
