/** Which run channel moves along an axis, by the axis's input quantity; remembered per programme. */
export interface AxisLink {
  /** Input quantity of the description, or `NAME/x` for an axis without one. */
  quantity: string;
  /** A known channel of the log reader, or a column title of the log. */
  channel: string;
  /** How it came to be: by name, by what the title means, or chosen by a person. */
  by: "column" | "title" | "hand";
}

/** A channel of a run: one value a time of the run, or of its own strictly rising `timeS`; NaN = missing. */
export interface CoverageChannel {
  values: Float64Array;
  unit: string;
  timeS?: Float64Array;
}

/** Samples of one run for coverage, only where the run is usable; times in strictly rising seconds. */
export interface CoverageRun {
  id: string;
  timeS: Float64Array;
  /** By the `channel` of a link, in the unit given. */
  channels: ReadonlyMap<string, CoverageChannel>;
}

export interface MapCoverage {
  name: string;
  /** Cells by axis, x first; time per cell in s, weight shared among the cells that interpolation uses; x fastest. */
  dims: number[];
  secondsByCell: number[];
  /** How many separate visits each cell had (entries after at least 0.5 s away), over all runs. */
  visitsByCell: number[];
  /** Those of the seconds above that lay beyond an end of an axis, where interpolation holds the last cell. */
  secondsOutside: number;
  changedCells: number;
  /** Visited = at least 0.1 s of weight (common practice, no source). */
  changedVisited: number;
  /** Cell numbers (x fastest) that changed and were never visited. */
  changedNeverVisited: number[];
  /** Links used, by axis. */
  links: (AxisLink | null)[];
}

/** Why a characteristic's coverage can't be told; "no_axes": nothing moves through it, it is left out of the share. */
export type NotToldCode = "no_axes" | "no_link" | "not_recorded" | "unit" | "axis_points" | "not_listed";

export interface Coverage {
  coverage: 1;
  runs: string[];
  maps: MapCoverage[];
  /** Changed characteristics whose coverage can't be told, and why (one value, axis without a link, channel not recorded …). */
  notTold: { name: string; changedCells: number; code: NotToldCode; reason: string }[];
  /** Of all maps and of what is not told but for "no_axes": those count as not visited. */
  changedCells: number;
  changedVisited: number;
}
