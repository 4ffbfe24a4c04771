import { useEffect, useRef } from "react";
import type { HeatStep } from "@/components/charts/heat/heat-ramp";

/** What of a cell tells whether it changed. */
interface Cell {
  step: HeatStep;
  isEdged?: boolean;
}

const isChanged = (cell: Cell) => cell.step !== "heat-0" || cell.isEdged === true;

/** First row and first column that hold a change; null where none does. */
export function firstChange(cells: readonly (readonly Cell[])[]): { row: number; column: number } | null {
  const row = cells.findIndex((line) => line.some(isChanged));
  if (row < 0) return null;
  const columns = cells.map((line) => line.findIndex(isChanged)).filter((column) => column >= 0);
  return { row, column: Math.min(...columns) };
}

/**
 * Scrolls a heat table once, when it comes into being, so that the first change is in sight, past the heads that stay. Without
 * script it starts at its first cell.
 */
export function useStartAtChange(cells: readonly (readonly Cell[])[]) {
  const scroller = useRef<HTMLDivElement>(null);
  const start = useRef(firstChange(cells));
  useEffect(() => {
    const box = scroller.current;
    if (!box || !start.current) return;
    const { row, column } = start.current;
    const cell = box.querySelectorAll("tbody tr")[row]?.querySelectorAll("td")[column];
    const head = box.querySelector<HTMLElement>("thead th");
    if (!cell || !head) return;
    if (cell.offsetLeft + cell.offsetWidth > box.clientWidth)
      box.scrollLeft = cell.offsetLeft - head.offsetWidth;
    if (cell.offsetTop + cell.offsetHeight > box.clientHeight)
      box.scrollTop = cell.offsetTop - head.offsetHeight;
  }, []);
  return scroller;
}
