"use client";

import { type KeyboardEvent, type ReactNode, useId, useRef, useState } from "react";
import { cn } from "@/lib/cn";

export interface Tab {
  id: string;
  label: ReactNode;
  content: ReactNode;
}

export interface TabsProps {
  /** Name of the whole set. */
  label: string;
  tabs: readonly Tab[];
  /** Id of the tab shown first; default the first. */
  initial?: string;
}

/**
 * Panels of which one is shown. Arrows, Home and End move between the tabs. Written here and not taken from the
 * dialog library, because its tabs put `style` attributes into the server's HTML, which the content policy refuses.
 */
export function Tabs({ label, tabs, initial }: TabsProps) {
  const base = useId();
  const [active, setActive] = useState(initial ?? tabs[0]?.id);
  const buttons = useRef(new Map<string, HTMLButtonElement>());

  const move = (event: KeyboardEvent) => {
    const at = tabs.findIndex((tab) => tab.id === active);
    const target: Record<string, number> = {
      ArrowRight: (at + 1) % tabs.length,
      ArrowLeft: (at - 1 + tabs.length) % tabs.length,
      Home: 0,
      End: tabs.length - 1,
    };
    const next = tabs[target[event.key] ?? -1];
    if (!next) return;
    event.preventDefault();
    setActive(next.id);
    buttons.current.get(next.id)?.focus();
  };

  return (
    <div>
      <div
        role="tablist"
        aria-label={label}
        onKeyDown={move}
        className="no-print flex overflow-x-auto border-line border-b"
      >
        {tabs.map((tab) => {
          const shown = tab.id === active;
          return (
            <button
              key={tab.id}
              ref={(node) => {
                if (node) buttons.current.set(tab.id, node);
                else buttons.current.delete(tab.id);
              }}
              type="button"
              role="tab"
              id={`${base}-${tab.id}-tab`}
              aria-selected={shown}
              aria-controls={`${base}-${tab.id}`}
              tabIndex={shown ? 0 : -1}
              onClick={() => setActive(tab.id)}
              className={cn(
                "-mb-px min-h-control shrink-0 border-transparent border-b-[3px] px-4 text-15 -outline-offset-3",
                shown ? "border-action font-semibold text-ink" : "text-ink2 hover:text-ink",
              )}
            >
              {tab.label}
            </button>
          );
        })}
      </div>
      {tabs.map((tab) => (
        <div
          key={tab.id}
          role="tabpanel"
          id={`${base}-${tab.id}`}
          aria-labelledby={`${base}-${tab.id}-tab`}
          hidden={tab.id !== active}
          className="pt-4 print:block"
        >
          {tab.content}
        </div>
      ))}
    </div>
  );
}
