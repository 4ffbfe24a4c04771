import type { ReactNode } from "react";
import { numberText } from "@/components/ui/data/number-text";
import { cn } from "@/lib/cn";

export interface HeatAxis {
  label: string;
  unit: string;
  decimals: number;
  points: readonly number[];
}

export interface HeatTableProps {
  caption: string;
  /** Across. */
  x: HeatAxis;
  /** Down; absent: a curve, shown as one row. */
  y?: HeatAxis;
  /** Differences B − A, row by row; null: not comparable; 0: unchanged. */
  cells: readonly (readonly (number | null)[])[];
  unit: string;
  decimals: number;
  /** Cells that no run visited; they carry a corner mark and a word for assistive technology. */
  unvisited?: readonly (readonly boolean[])[];
  note?: ReactNode;
}

const STEPS = ["heat-a3", "heat-a2", "heat-a1", "heat-0", "heat-b1", "heat-b2", "heat-b3"] as const;

/**
 * Class of the step of the ramp for a difference: thirds of the largest difference in the table to either side,
 * plain paper for none. Public for the legend and for tests.
 */
export function heatStep(value: number | null, largest: number): (typeof STEPS)[number] {
  if (value === null || value === 0 || largest <= 0) return "heat-0";
  const third = Math.min(3, Math.ceil((Math.abs(value) / largest) * 3 - 1e-9));
  return STEPS[3 + Math.sign(value) * third] ?? "heat-0";
}

/** Differences of a map in its own shape: axis points on both edges, the number with its sign in every cell, ink by size. */
export function HeatTable({ caption, x, y, cells, unit, decimals, unvisited, note }: HeatTableProps) {
  const largest = Math.max(0, ...cells.flat().map((value) => Math.abs(value ?? 0)));
  const axisHead = (axis: HeatAxis) => `${axis.label}${axis.unit ? `, ${axis.unit}` : ""}`;
  return (
    <div className="flex flex-col gap-2">
      {/* biome-ignore lint/a11y/useSemanticElements: a named scroller around a table, not a set of fields */}
      <div
        role="group"
        aria-label={caption}
        // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by key (WCAG 2.1.1)
        tabIndex={0}
        className="relative max-h-[36rem] overflow-auto border border-line print:max-h-none print:overflow-visible"
      >
        <table className="tabular border-separate border-spacing-0 text-13">
          <caption className="sr-only">
            {caption}, in {unit}
          </caption>
          <thead>
            <tr>
              <th
                scope="col"
                rowSpan={2}
                className="sticky top-0 left-0 z-20 max-w-32 border-line border-r border-b bg-surface px-2 py-1.5 text-right align-bottom font-medium text-ink2"
              >
                {y ? axisHead(y) : ""}
              </th>
              <th
                scope="colgroup"
                colSpan={x.points.length}
                className="px-2 pt-1.5 text-left font-medium text-ink2"
              >
                <span className="sticky left-22">{axisHead(x)}</span>
              </th>
            </tr>
            <tr>
              {x.points.map((point, column) => (
                <th
                  // biome-ignore lint/suspicious/noArrayIndexKey: axis points may repeat
                  key={column}
                  scope="col"
                  className="sticky top-0 z-10 border-line border-b bg-surface px-2 py-1.5 text-right font-medium text-ink2"
                >
                  {numberText(point, { decimals: x.decimals })}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {cells.map((row, line) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: axis points may repeat
              <tr key={line}>
                <th
                  scope="row"
                  className="sticky left-0 z-10 border-line border-r bg-surface px-2 py-1 text-right font-medium text-ink2"
                >
                  {y ? numberText(y.points[line], { decimals: y.decimals }) : "B \u2212 A"}
                </th>
                {row.map((value, column) => (
                  <td
                    // biome-ignore lint/suspicious/noArrayIndexKey: axis points may repeat
                    key={column}
                    className={cn(
                      "heat min-w-14 whitespace-nowrap px-2 py-1 text-right",
                      heatStep(value, largest),
                      unvisited?.[line]?.[column] && "heat-unvisited",
                    )}
                  >
                    {value === 0 ? "·" : numberText(value, { decimals, signed: true })}
                    {unvisited?.[line]?.[column] && <span className="sr-only"> not visited</span>}
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <p className="text-13 text-ink2">
        B − A in {unit}. Amber: A higher; plum: B higher; a dot: unchanged.
        {unvisited && " A cut corner: no run visited this cell."} {note}
      </p>
    </div>
  );
}
