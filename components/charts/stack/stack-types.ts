import type { Series } from "@/components/charts/frame/series";

export interface StackLine {
  values: Series;
  /** `a` dashed and round, `b` solid and square, `one` a single line that belongs to no side. */
  kind: "a" | "b" | "one";
  /** Printed at the right end and in the strip where a panel has several lines. */
  label?: string;
  /** Ends of a band round the line. */
  low?: Series;
  high?: Series;
}

export interface StackPanel {
  id: string;
  label: string;
  unit: string;
  decimals: number;
  lines: readonly StackLine[];
  /** Start the axis at zero. */
  fromZero?: boolean;
}

/** A named stretch, shaded through all panels. */
export interface StackSpan {
  from: number;
  to: number;
  label: string;
}

/** A stretch that was left out, hatched through all panels, or only warned of ("noted"): a hatched strip on top of each panel. */
export interface StackMask {
  from: number;
  to: number;
  why: string;
  kind: "masked" | "noted";
}

export interface StackAxis {
  /** As printed under the axis, e.g. "time, s". */
  title: string;
  /** As spoken, e.g. "time". */
  name: string;
  unit: string;
  /** As spoken behind a value, e.g. "seconds". */
  spokenUnit: string;
  decimals: number;
}

export interface StackData {
  /** Ascending, one value a sample or grid point; all lines have its length. */
  x: readonly number[];
  axis: StackAxis;
  panels: readonly StackPanel[];
  spans?: readonly StackSpan[];
  masks?: readonly StackMask[];
  /** Height of each panel, px; default 92. */
  panelHeight?: number;
}
