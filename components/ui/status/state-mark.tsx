import type { ReactNode } from "react";
import { cn } from "@/lib/cn";

/** How something that was asked stands. */
export type MarkState = "met" | "not_met" | "too_little" | "waived" | "stale" | "does_not_apply";

export const STATE_WORD: Record<MarkState, string> = {
  met: "Met",
  not_met: "Not met",
  too_little: "Too little",
  waived: "Waived",
  stale: "Stale",
  does_not_apply: "Does not apply",
};

const COLOUR: Record<MarkState, string> = {
  met: "text-met",
  not_met: "text-unmet",
  too_little: "text-thin",
  waived: "text-ink",
  stale: "text-ink2",
  does_not_apply: "text-ink2",
};

// Each silhouette differs from all others without its colour: disc, octagon, hourglass, bridge, broken ring, dash.
const SHAPE: Record<MarkState, ReactNode> = {
  met: (
    <>
      <circle cx="10" cy="10" r="9" fill="currentColor" />
      <path className="stroke-surface" strokeWidth="2.4" fill="none" d="m5.6 10.4 3.1 3.1 5.8-6.5" />
    </>
  ),
  not_met: (
    <>
      <path fill="currentColor" d="M6.27 1h7.46L19 6.27v7.46L13.73 19H6.27L1 13.73V6.27z" />
      <path className="stroke-surface" strokeWidth="2.4" d="m6.6 6.6 6.8 6.8m0-6.8-6.8 6.8" />
    </>
  ),
  too_little: (
    <>
      <path fill="currentColor" d="M4 1h12v2.6H4zM4 16.4h12V19H4z" />
      <path
        fill="currentColor"
        d="M5.5 4.4h9c0 2.7-1.8 4.1-3.3 5.6 1.5 1.5 3.3 2.9 3.3 5.6h-9c0-2.7 1.8-4.1 3.3-5.6-1.5-1.5-3.3-2.9-3.3-5.6z"
      />
    </>
  ),
  waived: (
    <path
      fill="none"
      stroke="currentColor"
      strokeWidth="2.2"
      d="M1 7.5h18M2.5 16c0-5.5 3.3-8.5 7.5-8.5s7.5 3 7.5 8.5M10 7.5V3.5M6.2 7.5V4.5M13.8 7.5V4.5"
    />
  ),
  stale: (
    <circle
      cx="10"
      cy="10"
      r="7.5"
      fill="none"
      stroke="currentColor"
      strokeWidth="2.6"
      strokeDasharray="9.2 2.58"
      strokeDashoffset="-2"
    />
  ),
  does_not_apply: <path stroke="currentColor" strokeWidth="2.6" d="M4 10h12" />,
};

export interface StateMarkProps {
  state: MarkState;
  /** Instead of the plain word, e.g. "Met by 0.4 %". */
  children?: ReactNode;
  /** Icon only; the word stays for assistive technology. Use where a column head or legend explains the icons. */
  iconOnly?: boolean;
  className?: string;
}

/** Icon and word for a state; never by colour alone. */
export function StateMark({ state, children, iconOnly = false, className }: StateMarkProps) {
  const word = children ?? STATE_WORD[state];
  return (
    <span
      className={cn(
        "inline-flex items-center gap-1.5 whitespace-nowrap font-semibold text-15",
        COLOUR[state],
        className,
      )}
    >
      <svg aria-hidden="true" viewBox="0 0 20 20" className="size-[1.2em] shrink-0">
        {SHAPE[state]}
      </svg>
      <span className={iconOnly ? "sr-only" : "whitespace-normal"}>{word}</span>
    </span>
  );
}
