import type { ReactNode } from "react";

/** How a revision stands, as far as the graph draws it. */
export type LineageState =
  | "draft"
  | "validating"
  | "in_review"
  | "stands"
  | "superseded"
  | "turned_down"
  | "rolled_back"
  | "withdrawn"
  | "set_aside"
  | "barred";

export const STATE_PHRASE: Record<LineageState, string> = {
  draft: "draft",
  validating: "validating",
  in_review: "in review",
  stands: "stands",
  superseded: "superseded",
  turned_down: "turned down",
  rolled_back: "rolled back",
  withdrawn: "withdrawn",
  set_aside: "set aside",
  barred: "barred",
};

// Squares stood or stand, rings are under way, crosses were refused, dashed ones have left the line.
const SHAPE: Record<LineageState, ReactNode> = {
  draft: <circle r="6" strokeWidth="2" strokeDasharray="3 2.2" className="fill-surface stroke-ink2" />,
  validating: <circle r="6" strokeWidth="2.5" className="fill-surface stroke-action" />,
  in_review: (
    <>
      <circle r="6" strokeWidth="2.5" className="fill-surface stroke-action" />
      <circle r="2.4" stroke="none" className="fill-action" />
    </>
  ),
  stands: <rect x="-7" y="-7" width="14" height="14" stroke="none" className="fill-action" />,
  superseded: (
    <rect x="-5.5" y="-5.5" width="11" height="11" strokeWidth="2.5" className="fill-surface stroke-ink" />
  ),
  turned_down: (
    <>
      <circle r="8" stroke="none" className="fill-surface" />
      <path d="M-5 -5L5 5M5 -5L-5 5" strokeWidth="2.5" className="stroke-unmet" />
    </>
  ),
  rolled_back: (
    <>
      <rect x="-5.5" y="-5.5" width="11" height="11" strokeWidth="2.5" className="fill-surface stroke-ink" />
      <path d="M-5.5 5.5L5.5 -5.5" strokeWidth="2" className="stroke-ink" />
    </>
  ),
  withdrawn: (
    <>
      <circle r="6" strokeWidth="2" strokeDasharray="3 2.2" className="fill-surface stroke-ink2" />
      <path d="M-3 0H3" strokeWidth="2" className="stroke-ink2" />
    </>
  ),
  set_aside: (
    <rect
      x="-5.5"
      y="-5.5"
      width="11"
      height="11"
      strokeWidth="2"
      strokeDasharray="3 2.2"
      className="fill-surface stroke-ink2"
    />
  ),
  barred: (
    <>
      <circle r="6.5" strokeWidth="2.5" className="fill-surface stroke-unmet" />
      <path d="M-4.5 4.5L4.5 -4.5" strokeWidth="2.5" className="stroke-unmet" />
    </>
  ),
};

/** The mark of a state, centred at x, y of the drawing around it. Each silhouette is told apart without colour. */
export function LineageMark({ state, x, y }: { state: LineageState; x: number; y: number }) {
  return <g transform={`translate(${x} ${y})`}>{SHAPE[state]}</g>;
}

/** The mark alone, for a legend or a heading. */
export function RevisionMark({ state }: { state: LineageState }) {
  return (
    <svg aria-hidden="true" viewBox="-9 -9 18 18" fill="none" className="size-4.5 shrink-0">
      {SHAPE[state]}
    </svg>
  );
}
