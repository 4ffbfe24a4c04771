import type { ReactNode } from "react";
import { cn } from "@/lib/cn";

export interface Column<Row> {
  key: string;
  header: ReactNode;
  /** Printed in the head behind the name, so that cells hold bare numbers. */
  unit?: string;
  /** Numbers stand in the numeral face, right-aligned. */
  numeric?: boolean;
  /** This cell names its row: `th scope="row"`. One a table. */
  rowHeader?: boolean;
  cell: (row: Row, index: number) => ReactNode;
  className?: string;
}

export interface TableProps<Row> {
  caption: string;
  /** Shown above the table; hidden by default because a heading mostly says it. */
  showCaption?: boolean;
  columns: readonly Column<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row, index: number) => string;
  /** Rows that are the chosen or the current one: plum left edge. */
  isSelected?: (row: Row) => boolean;
  /** Height after which the body scrolls under its head. */
  scroll?: "page" | "tall" | "short";
  dense?: boolean;
  /** Instead of rows when there are none. */
  empty?: ReactNode;
  className?: string;
}

const SCROLL = {
  page: "",
  tall: "max-h-[40rem] overflow-y-auto",
  short: "max-h-80 overflow-y-auto",
} as const;

/** A real table. It scrolls sideways inside itself on a narrow screen, never the page. */
export function Table<Row>({
  caption,
  showCaption = false,
  columns,
  rows,
  rowKey,
  isSelected,
  scroll = "page",
  dense = false,
  empty,
  className,
}: TableProps<Row>) {
  const pad = dense ? "px-2 py-1.5" : "px-2 py-2.5";
  return (
    // biome-ignore lint/a11y/useSemanticElements: a named scroller around a table, not a set of fields
    <div
      role="group"
      aria-label={caption}
      // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by key (WCAG 2.1.1)
      tabIndex={0}
      className={cn(
        "relative overflow-x-auto print:max-h-none print:overflow-visible",
        SCROLL[scroll],
        className,
      )}
    >
      <table className="w-full border-collapse text-15">
        <caption className={showCaption ? "pb-2 text-left text-13 text-ink2" : "sr-only"}>{caption}</caption>
        <thead className={scroll === "page" ? undefined : "sticky top-0 z-10 bg-surface"}>
          <tr className="border-line border-b">
            {columns.map((column) => (
              <th
                key={column.key}
                scope="col"
                className={cn(
                  "whitespace-nowrap px-2 py-2 align-bottom font-semibold text-13 text-ink2",
                  column.numeric ? "text-right" : "text-left",
                  column.className,
                )}
              >
                {column.header}
                {column.unit && <span className="font-normal">, {column.unit}</span>}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row, index) => (
            <tr
              key={rowKey(row, index)}
              className={cn(
                "border-line border-b last:border-b-0",
                isSelected?.(row) && "shadow-[inset_3px_0_0_var(--action)]",
              )}
            >
              {columns.map((column) => {
                const classes = cn(
                  pad,
                  "align-baseline",
                  column.numeric ? "tabular whitespace-nowrap text-right" : "text-left",
                  column.className,
                );
                return column.rowHeader ? (
                  <th key={column.key} scope="row" className={cn(classes, "font-medium")}>
                    {column.cell(row, index)}
                  </th>
                ) : (
                  <td key={column.key} className={classes}>
                    {column.cell(row, index)}
                  </td>
                );
              })}
            </tr>
          ))}
          {rows.length === 0 && empty && (
            <tr>
              <td colSpan={columns.length} className="px-2 py-6 text-ink2">
                {empty}
              </td>
            </tr>
          )}
        </tbody>
      </table>
    </div>
  );
}
