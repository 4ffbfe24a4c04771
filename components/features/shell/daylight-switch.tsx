"use client";

import { useState } from "react";
import { DAYLIGHT_COOKIE } from "@/components/features/shell/appearance";
import { rememberAppearance } from "@/components/features/shell/remember-appearance";

/** Daylight: black on white, heavier and larger, for a screen in the sun. For the upload and the run page. */
export function DaylightSwitch({ initial }: { initial: boolean }) {
  const [on, setOn] = useState(initial);

  const toggle = () => {
    const next = !on;
    setOn(next);
    if (next) document.documentElement.dataset.daylight = "on";
    else delete document.documentElement.dataset.daylight;
    rememberAppearance(DAYLIGHT_COOKIE, next ? "on" : "off");
  };

  return (
    <button
      type="button"
      role="switch"
      aria-checked={on}
      onClick={toggle}
      className="no-print inline-flex min-h-control items-center gap-3 rounded px-2 font-semibold text-15 hover:bg-sunk"
    >
      Daylight
      <span
        aria-hidden
        className="flex h-6 w-11 items-center rounded-full border border-edge bg-surface p-0.5 in-aria-checked:justify-end in-aria-checked:border-action in-aria-checked:bg-action"
      >
        <span className="size-4.5 rounded-full bg-edge in-aria-checked:bg-on-action" />
      </span>
    </button>
  );
}
