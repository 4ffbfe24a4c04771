"use client";

import { type KeyboardEvent, type ReactNode, useRef } from "react";

export interface ChartFigureProps {
  title: ReactNode;
  /** Controls at the right of the title. */
  controls?: ReactNode;
  /** The docked values. */
  strip: ReactNode;
  /** The drawing with its cursor layer. */
  children: ReactNode;
  /** The sentence that says what is to be seen; it is also the text alternative. */
  summaryId: string;
  summary: string;
  /** What was done to the curves: smoothing, correction, alignment; and what was left out. */
  notes?: readonly string[];
  /** The real table behind the drawing. */
  table: ReactNode;
  tableSummary?: string;
  /** Further keys, called for keys pressed inside the figure but outside text fields. True: handled. */
  onShortcut?: (key: string) => boolean;
}

/** What every chart stands in: title, controls, values, drawing, sentence, notes, table, between four crop marks. */
export function ChartFigure({
  title,
  controls,
  strip,
  children,
  summaryId,
  summary,
  notes = [],
  table,
  tableSummary = "Values table",
  onShortcut,
}: ChartFigureProps) {
  const details = useRef<HTMLDetailsElement>(null);

  const onKeyDown = (event: KeyboardEvent) => {
    const target = event.target;
    const typing = target instanceof HTMLInputElement && target.type !== "radio";
    if (typing || event.ctrlKey || event.metaKey || event.altKey) return;
    if (event.key === "t" && details.current) {
      details.current.open = !details.current.open;
      event.preventDefault();
    } else if (onShortcut?.(event.key)) {
      event.preventDefault();
    }
  };

  return (
    <figure onKeyDown={onKeyDown} className="crop-marks flex min-w-0 flex-col gap-3 bg-surface p-4 md:p-5">
      <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2">
        <h3 className="text-17">{title}</h3>
        {controls && <div className="no-print flex flex-wrap items-center gap-2">{controls}</div>}
      </div>
      {strip}
      {children}
      <figcaption className="flex flex-col gap-2 text-15">
        <p id={summaryId} className="max-w-prose">
          {summary}
        </p>
        {notes.length > 0 && (
          <ul className="flex max-w-prose flex-col gap-0.5 text-13 text-ink2">
            {notes.map((note) => (
              <li key={note}>{note}</li>
            ))}
          </ul>
        )}
      </figcaption>
      <details ref={details} className="group/table no-print border-line border-t pt-1">
        <summary className="flex min-h-control items-center gap-2 font-semibold text-15 hover:text-action">
          {tableSummary}
          <kbd className="tabular rounded border border-line px-1.5 font-normal text-13 text-ink2">t</kbd>
        </summary>
        {table}
      </details>
    </figure>
  );
}
