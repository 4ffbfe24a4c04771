"use client";

import { useMemo } from "react";
import { OverlayChart } from "@/components/charts/overlay/overlay-chart";
import type { OverlayView } from "@/components/charts/overlay/overlay-types";
import { viewToParameters } from "@/components/features/comparisons/figure-view";
import { overlayData } from "@/components/features/comparisons/overlay-data";
import type { PlottedGrid } from "@/lib/compare/plotted-grid";

export interface ComparisonFigureProps {
  grid: PlottedGrid;
  labels: { a: string; b: string };
  title: string;
  notes: readonly string[];
  initialView?: Partial<OverlayView>;
  /** Keeps the address in step with the view, so that a copied link shows the same. */
  keepInAddress?: boolean;
  still?: boolean;
}

/** Side A and side B of a comparison with their difference, drawn from the plotted grid. */
export function ComparisonFigure({
  grid,
  labels,
  title,
  notes,
  initialView,
  keepInAddress = false,
  still,
}: ComparisonFigureProps) {
  const data = useMemo(() => overlayData(grid, labels), [grid, labels]);
  const remember = (view: OverlayView) => window.history.replaceState(null, "", `?${viewToParameters(view)}`);
  return (
    <OverlayChart
      data={data}
      title={title}
      notes={notes}
      initialView={initialView}
      onViewChange={keepInAddress ? remember : undefined}
      still={still}
    />
  );
}
