"use client";

import { Fragment, memo } from "react";
import type { HeatStep } from "@/components/charts/heat/heat-ramp";
import { useStartAtChange } from "@/components/charts/heat/use-start-at-change";
import { cn } from "@/lib/cn";

export interface HeatAxis {
  /** Name and unit, e.g. "Engine speed, 1/min". */
  head: string;
  /** Text of each point that is shown. */
  points: readonly string[];
  /** Text of the point before, where it moved; else null. */
  was?: readonly (string | null)[];
}

/** A glyph at a cell, with what it means for the legend and for assistive technology. */
export interface HeatMark {
  glyph: string;
  words: string;
}

export interface HeatCell {
  text: string;
  step: HeatStep;
  /** Small second line, e.g. "4.2 s, 3×". */
  below?: string;
  mark?: HeatMark;
  /** A changed cell that no run visited: a cut corner. */
  isUnvisited?: boolean;
  /** Changed, though it has no direction, e.g. words: a heavy edge. */
  isEdged?: boolean;
}

export interface HeatTableProps {
  caption: string;
  /** Across. */
  x: HeatAxis;
  /** Down; null: one row, which `rowHead` names. */
  y: HeatAxis | null;
  rowHead?: string;
  /** Row by row, as many as `y` has points. */
  cells: readonly (readonly HeatCell[])[];
}

const headCell = "border-line bg-surface px-2 py-1.5 text-right font-medium text-ink2 whitespace-nowrap";

/**
 * A two-axis table in its own shape: axis points on both edges that stay in sight, a number in every cell, ink by the
 * size of its difference. It scrolls inside itself, and opens where the changes begin.
 */
export function HeatTable({ caption, x, y, rowHead = "", cells }: HeatTableProps) {
  const scroller = useStartAtChange(cells);
  return (
    // biome-ignore lint/a11y/useSemanticElements: a named scroller around a table, not a set of fields
    <div
      ref={scroller}
      role="group"
      aria-label={caption}
      // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by key (WCAG 2.1.1)
      tabIndex={0}
      className="heat-scroller relative max-h-[36rem] overflow-auto border border-line print:max-h-none print:overflow-visible"
    >
      <table className="tabular border-separate border-spacing-0 text-13">
        <caption className="sr-only">{caption}</caption>
        <thead>
          <tr>
            <th
              scope="col"
              rowSpan={2}
              className={cn(
                headCell,
                "sticky top-0 left-0 z-20 min-w-28 max-w-32 whitespace-normal border-r border-b align-bottom [overflow-wrap:anywhere]",
              )}
            >
              {y && breakable(y.head)}
            </th>
            <th
              scope="colgroup"
              colSpan={x.points.length}
              className="px-2 pt-1.5 text-left font-medium text-ink2"
            >
              <span className="sticky left-34">{x.head}</span>
            </th>
          </tr>
          <tr>
            {x.points.map((point, column) => (
              <th
                // biome-ignore lint/suspicious/noArrayIndexKey: axis points may repeat
                key={column}
                scope="col"
                className={cn(headCell, "sticky top-0 z-10 border-b align-bottom")}
              >
                <AxisPoint text={point} was={x.was?.[column]} />
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {cells.map((row, line) => (
            <HeatRow
              // biome-ignore lint/suspicious/noArrayIndexKey: axis points may repeat
              key={line}
              head={y ? (y.points[line] ?? "") : rowHead}
              was={y?.was?.[line]}
              cells={row}
            />
          ))}
        </tbody>
      </table>
    </div>
  );
}

/** A name that breaks behind its underscores before it breaks anywhere. */
function breakable(name: string) {
  return name.split(/(?<=_)/).map((part, at) => (
    // biome-ignore lint/suspicious/noArrayIndexKey: parts never move
    <Fragment key={at}>
      {at > 0 && <wbr />}
      {part}
    </Fragment>
  ));
}

/** A point of an axis; where it moved, the old one stands struck above the new one. */
function AxisPoint({ text, was }: { text: string; was: string | null | undefined }) {
  if (was === null || was === undefined) return text;
  return (
    <>
      <del className="block font-normal">
        {was}
        <span className="sr-only">, now</span>
      </del>{" "}
      <ins className="block font-semibold text-ink no-underline">{text}</ins>
    </>
  );
}

const HeatRow = memo(function HeatRow({
  head,
  was,
  cells,
}: {
  head: string;
  was: string | null | undefined;
  cells: readonly HeatCell[];
}) {
  return (
    <tr>
      <th scope="row" className={cn(headCell, "sticky left-0 z-10 border-r py-1")}>
        <AxisPoint text={head} was={was} />
      </th>
      {cells.map((cell, column) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: axis points may repeat
        <td key={column} className={cellClass(cell)}>
          {cell.mark && (
            <>
              <span aria-hidden="true">{cell.mark.glyph} </span>
              <span className="sr-only">{cell.mark.words}: </span>
            </>
          )}
          {cell.text}
          {cell.isUnvisited && <span className="sr-only">, not visited</span>}
          {cell.below !== undefined && <span className="block">{cell.below}</span>}
        </td>
      ))}
    </tr>
  );
});

/** Plain joining: thousands of cells need no merging of utilities. */
function cellClass({ step, isUnvisited, isEdged }: HeatCell): string {
  return `heat ${step}${isUnvisited ? " heat-unvisited" : ""}${isEdged ? " heat-edged" : ""}`;
}
